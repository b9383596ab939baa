import { computeBetaPrefactor, computeIncompleteBeta } from './incomplete-beta.ts';
import type { Tails } from './incomplete-gamma.ts';
import { solvePositiveQuantile } from './solve-quantile.ts';

/**
 * Probability that an F value with df1 and df2 degrees of freedom (any positive reals) is at or
 * below x.
 *
 * Shapes: numbers in, number out. Units: none.
 * Method: incomplete beta function. Source: Abramowitz and Stegun 26.6.
 * Accuracy: relative 1e-10; tests/reference/distributions.test.ts.
 * @throws RangeError when a df is not positive or x is not a number
 * @example computeFCdf(3.354130828529, 2, 27) // 0.95
 */
export function computeFCdf(x: number, df1: number, df2: number): number {
	return computeFTails(x, df1, df2).lower;
}

/**
 * Probability that an F value is above x; keeps its digits far out in the tail.
 *
 * Shapes: numbers in, number out. Units: none.
 * Method: incomplete beta function. Source: Abramowitz and Stegun 26.6.
 * Accuracy: relative 1e-10; tests/reference/distributions.test.ts.
 * @throws RangeError when a df is not positive or x is not a number
 * @example computeFSurvival(3.354130828529, 2, 27) // 0.05
 */
export function computeFSurvival(x: number, df1: number, df2: number): number {
	return computeFTails(x, df1, df2).upper;
}

/**
 * The value that a share p of F values lies at or below.
 *
 * Shapes: numbers in, number out. Units: none.
 * Method: safeguarded Newton on the logarithms. Source: Abramowitz and Stegun 26.6.
 * Accuracy: relative 1e-10; tests/reference/distributions.test.ts.
 * @throws RangeError when p is not in 0 to 1 or a df is not positive
 * @example computeFQuantile(0.95, 2, 27) // 3.354130828529
 */
export function computeFQuantile(p: number, df1: number, df2: number): number {
	if (!(p >= 0 && p <= 1)) throw new RangeError(`p must lie in 0 to 1, got ${p}`);
	requireDf(df1, df2);
	if (p === 0) return 0;
	if (p === 1) return Infinity;
	const tail = p <= 0.5 ? 'lower' : 'upper';
	return solveFQuantile({ tail, probability: p <= 0.5 ? p : 1 - p, df1, df2 });
}

/**
 * The F value with the probability q above it; keeps its digits for a tiny q.
 *
 * Shapes: numbers in, number out. Units: none.
 * Method and source: see {@link computeFQuantile}, on the upper tail.
 * Accuracy: relative 1e-10; tests/reference/distributions.test.ts.
 * @throws RangeError when q is not in 0 to 1 or a df is not positive
 * @example computeFUpperQuantile(0.05, 2, 27) // 3.354130828529
 */
export function computeFUpperQuantile(q: number, df1: number, df2: number): number {
	if (!(q >= 0 && q <= 1)) throw new RangeError(`q must lie in 0 to 1, got ${q}`);
	requireDf(df1, df2);
	if (q === 0) return Infinity;
	if (q === 1) return 0;
	const tail = q <= 0.5 ? 'upper' : 'lower';
	return solveFQuantile({ tail, probability: q <= 0.5 ? q : 1 - q, df1, df2 });
}

/** The F value with a given probability (strictly between 0 and 1) in a named tail. */
export function solveFQuantile(options: {
	tail: keyof Tails;
	probability: number;
	df1: number;
	df2: number;
}): number {
	const { tail, probability, df1, df2 } = options;
	return solvePositiveQuantile({
		tail,
		probability,
		computeTails: (x) => computeFTails(x, df1, df2),
		computeDensity: (x) => computeFDensity(x, df1, df2),
		guess: 1
	});
}

/** Both tails of the F distribution at x. */
export function computeFTails(x: number, df1: number, df2: number): Tails {
	requireDf(df1, df2);
	if (Number.isNaN(x)) throw new RangeError('x must be a number');
	if (x <= 0) return { lower: 0, upper: 1 };
	if (x === Infinity) return { lower: 1, upper: 0 };
	return computeIncompleteBeta(toBetaArguments(x, df1, df2));
}

function computeFDensity(x: number, df1: number, df2: number): number {
	const beta = toBetaArguments(x, df1, df2);
	if (beta.x === 0 || beta.complement === 0) return 0;
	return computeBetaPrefactor(beta) / x;
}

function toBetaArguments(x: number, df1: number, df2: number) {
	const ratio = (df1 / df2) * x;
	const small = ratio <= 1;
	const share = small ? ratio / (1 + ratio) : 1 / (1 + 1 / ratio);
	const complement = small ? 1 / (1 + ratio) : 1 / ratio / (1 + 1 / ratio);
	return { a: df1 / 2, b: df2 / 2, x: share, complement };
}

function requireDf(df1: number, df2: number): void {
	const good = df1 > 0 && df2 > 0 && df1 < Infinity && df2 < Infinity;
	if (!good) throw new RangeError(`df1 and df2 must be positive, got ${df1} and ${df2}`);
}

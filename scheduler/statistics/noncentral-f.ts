import { findTailPoint } from './find-tail-point.ts';
import { computeBetaPrefactor, computeIncompleteBeta } from './incomplete-beta.ts';
import type { Tails } from './incomplete-gamma.ts';
import { sumPoissonMixture } from './poisson-mixture.ts';

/** Degrees of freedom (any positive reals) and noncentrality of the numerator (0 to 1e6). */
export type NoncentralF = { df1: number; df2: number; ncp: number };

/**
 * Both tails of the noncentral F distribution at x.
 *
 * Shapes: numbers in, both tails out. Units: none.
 * Method: Poisson mixture of incomplete beta functions.
 * Source: method sheet E; jstat has no noncentral F that is right (its centralF is central).
 * Accuracy: absolute 1e-12, relative 1e-10 in small tails; tests/reference/noncentral.test.ts.
 * @throws RangeError when a df is not positive, ncp is out of range or x is not a number
 * @example computeNoncentralFTails(3, { df1: 2, df2: 30, ncp: 4 }).lower // 0.5721775764798
 */
export function computeNoncentralFTails(x: number, { df1, df2, ncp }: NoncentralF): Tails {
	requireArguments(x, df1, df2, ncp);
	if (x <= 0) return { lower: 0, upper: 1 };
	if (x === Infinity) return { lower: 1, upper: 0 };
	const ratio = (df1 / df2) * x;
	const beta = { b: df2 / 2, x: 1 / (1 + 1 / ratio), complement: 1 / (1 + ratio) };
	const computeStep = (j: number) => {
		const a = df1 / 2 + j;
		return beta.complement === 0 || beta.x === 0 ? 0 : computeBetaPrefactor({ a, ...beta }) / a;
	};
	return sumPoissonMixture(ncp / 2, {
		computeTails: (j) => computeIncompleteBeta({ a: df1 / 2 + j, ...beta }),
		computeStep,
		computeStepRatio: (j) => ((df1 / 2 + j - 1 + beta.b) * beta.x) / (df1 / 2 + j)
	});
}

/** Probability at or below x; see {@link computeNoncentralFTails}. */
export function computeNoncentralFCdf(x: number, shape: NoncentralF): number {
	return computeNoncentralFTails(x, shape).lower;
}

/** Probability above x; see {@link computeNoncentralFTails}. */
export function computeNoncentralFSurvival(x: number, shape: NoncentralF): number {
	return computeNoncentralFTails(x, shape).upper;
}

/**
 * The value that a share p of noncentral F values lies at or below.
 *
 * Shapes: numbers in, number out. Units: none. Method: root search on the logarithm of the tail.
 * Source: method sheet E. Accuracy: relative 1e-10; tests/reference/noncentral.test.ts.
 * @throws RangeError when p is not in 0 to 1, a df is not positive or ncp is out of range
 */
export function computeNoncentralFQuantile(p: number, shape: NoncentralF): number {
	return findTailPoint(p, (x) => computeNoncentralFTails(x, shape), {
		...{ support: 'positive', guess: 1 + shape.ncp / shape.df1 }
	});
}

function requireArguments(x: number, df1: number, df2: number, ncp: number): void {
	const good = df1 > 0 && df2 > 0 && df1 < Infinity && df2 < Infinity;
	if (!good) throw new RangeError(`df1 and df2 must be positive, got ${df1} and ${df2}`);
	if (!(ncp >= 0 && ncp <= 1e6)) throw new RangeError(`ncp must lie in 0 to 1e6, got ${ncp}`);
	if (Number.isNaN(x)) throw new RangeError('x must be a number');
}

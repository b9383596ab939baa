import { computeIncompleteGamma, type Tails } from './incomplete-gamma.ts';
import { computeNormalQuantile } from './normal.ts';
import { computePoissonWeight } from './saddle-point.ts';
import { solvePositiveQuantile } from './solve-quantile.ts';

/**
 * Probability that a chi-square value with df degrees of freedom (any positive real) is at or
 * below x.
 *
 * Shapes: numbers in, number out. Units: none.
 * Method: incomplete gamma function. Source: Abramowitz and Stegun 26.4.
 * Accuracy: relative 1e-10; tests/reference/distributions.test.ts.
 * @throws RangeError when df is not positive or x is not a number
 * @example computeChiSquareCdf(5.991464547108, 2) // 0.95
 */
export function computeChiSquareCdf(x: number, df: number): number {
	return computeTails(x, df).lower;
}

/**
 * Probability that a chi-square value is above x; keeps its digits far out in the tail.
 *
 * Shapes: numbers in, number out. Units: none.
 * Method: incomplete gamma function. Source: Abramowitz and Stegun 26.4. jstat is not used: its
 * 1 - cdf is 0 where the truth is 1.9e-22.
 * Accuracy: relative 1e-10; tests/reference/distributions.test.ts.
 * @throws RangeError when df is not positive or x is not a number
 * @example computeChiSquareSurvival(100, 2) // 1.928750e-22
 */
export function computeChiSquareSurvival(x: number, df: number): number {
	return computeTails(x, df).upper;
}

/**
 * The value that a share p of chi-square values lies at or below.
 *
 * Shapes: numbers in, number out. Units: none.
 * Method: Wilson-Hilferty start, then safeguarded Newton. Source: Abramowitz and Stegun 26.4.17.
 * Accuracy: relative 1e-10; tests/reference/distributions.test.ts.
 * @throws RangeError when p is not in 0 to 1 or df is not positive
 * @example computeChiSquareQuantile(0.95, 2) // 5.991464547108
 */
export function computeChiSquareQuantile(p: number, df: number): number {
	requireShare(p);
	requireDf(df);
	if (p === 0) return 0;
	if (p === 1) return Infinity;
	const start = computeNormalQuantile(p);
	return p <= 0.5 ? solve('lower', p, df, start) : solve('upper', 1 - p, df, start);
}

/**
 * The chi-square value with the probability q above it; keeps its digits for a tiny q.
 *
 * Shapes: numbers in, number out. Units: none.
 * Method and source: see {@link computeChiSquareQuantile}, on the upper tail.
 * Accuracy: relative 1e-10; tests/reference/distributions.test.ts.
 * @throws RangeError when q is not in 0 to 1 or df is not positive
 * @example computeChiSquareUpperQuantile(1e-30, 2) // 138.1551055796
 */
export function computeChiSquareUpperQuantile(q: number, df: number): number {
	requireShare(q);
	requireDf(df);
	if (q === 0) return Infinity;
	if (q === 1) return 0;
	const start = -computeNormalQuantile(q);
	return q <= 0.5 ? solve('upper', q, df, start) : solve('lower', 1 - q, df, start);
}

/** @param start the normal value with the same tail */
function solve(tail: keyof Tails, probability: number, df: number, start: number): number {
	const spread = 2 / (9 * df);
	const cubeRoot = 1 - spread + start * Math.sqrt(spread);
	return solvePositiveQuantile({
		tail,
		probability,
		computeTails: (x) => computeTails(x, df),
		computeDensity: (x) => computePoissonWeight(df / 2, x / 2) * (df / 2 / x),
		guess: cubeRoot > 0.1 ? df * cubeRoot ** 3 : df * 1e-3
	});
}

function computeTails(x: number, df: number) {
	requireDf(df);
	if (Number.isNaN(x)) throw new RangeError('x must be a number');
	return computeIncompleteGamma(df / 2, Math.max(0, x) / 2);
}

function requireDf(df: number): void {
	if (!(df > 0 && df < Infinity)) throw new RangeError(`df must be positive, got ${df}`);
}

function requireShare(p: number): void {
	if (!(p >= 0 && p <= 1)) throw new RangeError(`p must lie in 0 to 1, got ${p}`);
}

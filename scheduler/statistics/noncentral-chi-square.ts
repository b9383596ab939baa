import { computeIncompleteGamma, type Tails } from './incomplete-gamma.ts';
import { findTailPoint } from './find-tail-point.ts';
import { sumPoissonMixture } from './poisson-mixture.ts';
import { computePoissonWeight } from './saddle-point.ts';

/** Degrees of freedom (any positive real) and noncentrality (0 to 1e6). */
export type NoncentralChiSquare = { df: number; ncp: number };

/**
 * Both tails of the noncentral chi-square distribution at x.
 *
 * Shapes: numbers in, both tails out. Units: none.
 * Method: Poisson mixture of central chi-square distributions with df + 2j degrees of freedom.
 * Source: method sheet E; neither jstat nor simple-statistics has this distribution.
 * Accuracy: absolute 1e-12, relative 1e-10 in small tails; tests/reference/noncentral.test.ts.
 * @throws RangeError when df is not positive, ncp is out of range or x is not a number
 * @example computeNoncentralChiSquareTails(10, { df: 3, ncp: 4 }).upper // 0.2222...
 */
export function computeNoncentralChiSquareTails(
	x: number,
	{ df, ncp }: NoncentralChiSquare
): Tails {
	requireArguments(x, df, ncp);
	if (x / 2 <= 0) return { lower: 0, upper: 1 };
	if (x === Infinity) return { lower: 1, upper: 0 };
	const half = x / 2;
	return sumPoissonMixture(ncp / 2, {
		computeTails: (j) => computeIncompleteGamma(df / 2 + j, half),
		computeStep: (j) => computePoissonWeight(df / 2 + j, half),
		computeStepRatio: (j) => half / (df / 2 + j)
	});
}

/** Probability at or below x; see {@link computeNoncentralChiSquareTails}. */
export function computeNoncentralChiSquareCdf(x: number, shape: NoncentralChiSquare): number {
	return computeNoncentralChiSquareTails(x, shape).lower;
}

/** Probability above x; see {@link computeNoncentralChiSquareTails}. */
export function computeNoncentralChiSquareSurvival(x: number, shape: NoncentralChiSquare): number {
	return computeNoncentralChiSquareTails(x, shape).upper;
}

/**
 * The value that a share p of noncentral chi-square values lies at or below.
 *
 * Shapes: numbers in, number out. Units: none. Method: root search on the logarithm of the tail.
 * Source: method sheet E. Accuracy: relative 1e-10; tests/reference/noncentral.test.ts.
 * @throws RangeError when p is not in 0 to 1, df is not positive or ncp is out of range
 */
export function computeNoncentralChiSquareQuantile(p: number, shape: NoncentralChiSquare): number {
	return findTailPoint(p, (x) => computeNoncentralChiSquareTails(x, shape), {
		...{ support: 'positive', guess: shape.df + shape.ncp }
	});
}

function requireArguments(x: number, df: number, ncp: number): void {
	if (!(df > 0 && df < Infinity)) throw new RangeError(`df must be positive, got ${df}`);
	if (!(ncp >= 0 && ncp <= 1e6)) throw new RangeError(`ncp must lie in 0 to 1e6, got ${ncp}`);
	if (Number.isNaN(x)) throw new RangeError('x must be a number');
}

import { computeChiSquareQuantile, computeChiSquareUpperQuantile } from './chi-square.ts';
import { computeIncompleteGamma, type Tails } from './incomplete-gamma.ts';

/** Shape (any positive real) and rate (1 / scale). */
export type GammaShape = { shape: number; rate: number };

/**
 * Both tails of the gamma distribution at x.
 *
 * Shapes: numbers in, both tails out. Units: x in 1 / rate.
 * Method: incomplete gamma function. Source: Abramowitz and Stegun 6.5. jstat's `gamma.cdf` is not
 * used: it keeps no upper tail.
 * Accuracy: relative 1e-10 of each tail; tests/reference/distributions.test.ts.
 * @throws RangeError when shape or rate is not positive or x is not a number
 * @example computeGammaTails(2, { shape: 1, rate: 1 }).upper // 0.1353352832366
 */
export function computeGammaTails(x: number, { shape, rate }: GammaShape): Tails {
	requireRate(rate);
	if (Number.isNaN(x)) throw new RangeError('x must be a number');
	return computeIncompleteGamma(shape, Math.max(0, x) * rate);
}

/**
 * The value that a share p of gamma values lies at or below.
 *
 * Shapes: numbers in, number out. Units: 1 / rate.
 * Method: half the chi-square quantile with twice the shape. Source: Abramowitz and Stegun 26.4.
 * Accuracy: relative 1e-10; tests/reference/distributions.test.ts.
 * @throws RangeError when p is not in 0 to 1, or shape or rate is not positive
 */
export function computeGammaQuantile(p: number, { shape, rate }: GammaShape): number {
	requireRate(rate);
	return computeChiSquareQuantile(p, 2 * shape) / (2 * rate);
}

/** The value with the probability q above it; keeps its digits for a tiny q. */
export function computeGammaUpperQuantile(q: number, { shape, rate }: GammaShape): number {
	requireRate(rate);
	return computeChiSquareUpperQuantile(q, 2 * shape) / (2 * rate);
}

function requireRate(rate: number): void {
	if (!(rate > 0 && rate < Infinity)) throw new RangeError(`rate must be positive, got ${rate}`);
}

import { solveFQuantile } from './f-distribution.ts';
import { computeIncompleteBeta } from './incomplete-beta.ts';
import type { Tails } from './incomplete-gamma.ts';

/** Both shapes, any positive reals. */
export type BetaShape = { a: number; b: number };

/**
 * Both tails of the beta distribution at x.
 *
 * Shapes: numbers in, both tails out. Units: share 0 to 1.
 * Method: incomplete beta function. Source: Abramowitz and Stegun 26.5. jstat's `beta.cdf` is not
 * used: it stops at about 3e-8 and keeps no upper tail.
 * Accuracy: relative 1e-10 of each tail; tests/reference/distributions.test.ts.
 * @throws RangeError when a shape is not positive or x is not a number
 * @example computeBetaTails(0.4, { a: 2, b: 3 }).lower // 0.5248
 */
export function computeBetaTails(x: number, { a, b }: BetaShape): Tails {
	if (Number.isNaN(x)) throw new RangeError('x must be a number');
	const inside = Math.min(1, Math.max(0, x));
	return computeIncompleteBeta({ a, b, x: inside, complement: 1 - inside });
}

/**
 * The value that a share p of beta values lies at or below.
 *
 * Shapes: numbers in, number out. Units: share 0 to 1.
 * Method: the odds are a / b times an F value with 2a and 2b degrees of freedom.
 * Source: Abramowitz and Stegun 26.6.2.
 * Accuracy: relative 1e-10; tests/reference/distributions.test.ts.
 * @throws RangeError when p is not in 0 to 1 or a shape is not positive
 * @example computeBetaQuantile(0.5, { a: 2, b: 2 }) // 0.5
 */
export function computeBetaQuantile(p: number, shape: BetaShape): number {
	requireShare(p);
	if (p === 0 || p === 1) return p;
	return p <= 0.5 ? solve('lower', p, shape) : solve('upper', 1 - p, shape);
}

/** The value with the probability q above it; keeps its digits for a tiny q. */
export function computeBetaUpperQuantile(q: number, shape: BetaShape): number {
	requireShare(q);
	if (q === 0 || q === 1) return 1 - q;
	return q <= 0.5 ? solve('upper', q, shape) : solve('lower', 1 - q, shape);
}

function solve(tail: keyof Tails, probability: number, { a, b }: BetaShape): number {
	if (!(a > 0 && b > 0 && a < Infinity && b < Infinity))
		throw new RangeError(`a and b must be positive, got ${a} and ${b}`);
	const odds = (a / b) * solveFQuantile({ tail, probability, df1: 2 * a, df2: 2 * b });
	return odds <= 1 ? odds / (1 + odds) : 1 / (1 + 1 / odds);
}

function requireShare(p: number): void {
	if (!(p >= 0 && p <= 1)) throw new RangeError(`p must lie in 0 to 1, got ${p}`);
}

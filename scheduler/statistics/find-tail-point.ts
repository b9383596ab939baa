import { findRoot } from './find-root.ts';
import type { Tails } from './incomplete-gamma.ts';

export type TailPointOptions = {
	/** `positive`: from 0 on. `real`: every number. */
	support: 'positive' | 'real';
	/** Somewhere in the middle of the distribution. */
	guess: number;
};

/**
 * The point that a share p of a distribution lies at or below, from its two tails alone.
 *
 * Shapes: share and function in, number out. Units: those of the distribution.
 * Method: a bracket is doubled from the guess until it holds the point, then a root search on the
 * logarithm of the smaller tail (on a logarithmic scale for positive distributions).
 * Accuracy: that of the tails; tests/reference/noncentral.test.ts.
 * @throws RangeError when p is not in 0 to 1
 */
export function findTailPoint(
	p: number,
	computeTails: (x: number) => Tails,
	{ support, guess }: TailPointOptions
): number {
	if (!(p >= 0 && p <= 1)) throw new RangeError(`p must lie in 0 to 1, got ${p}`);
	if (p === 0) return support === 'positive' ? 0 : -Infinity;
	if (p === 1) return Infinity;
	const read = support === 'positive' ? Math.exp : (u: number) => u;
	const excess = (u: number) => {
		const { lower, upper } = computeTails(read(u));
		const value = p <= 0.5 ? Math.log(lower / p) : Math.log((1 - p) / upper);
		// An empty tail is far on its side; a root search needs a finite number.
		return Math.min(1e4, Math.max(-1e4, value));
	};
	const start = support === 'positive' ? Math.log(Math.max(guess, 1e-300)) : guess;
	const limit = support === 'positive' ? 700 : 1e300;
	let step = support === 'positive' ? 0.5 : Math.max(1, Math.abs(guess) / 8);
	let [low, high] = [start - step, start + step];
	while (excess(low) > 0 && low > -limit) low = Math.max(-limit, low - (step *= 2));
	while (excess(high) < 0 && high < limit) high = Math.min(limit, high + (step *= 2));
	if (excess(low) > 0) return read(low);
	return read(findRoot({ compute: excess, low, high, tolerance: 1e-15 }));
}

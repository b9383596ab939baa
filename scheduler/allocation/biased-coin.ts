import { drawBelow } from '../random/random-stream.ts';
import type { CryptographicStream } from './cryptographic-stream.ts';
import { drawWithProbability } from './draw-with-probability.ts';

/**
 * Draws one of two arms with a coin that favours the smaller one.
 *
 * Shapes: people in each arm and probability in, arm (0 or 1) out. Units: people.
 * Method: the smaller arm with probability p, a fair coin when both are alike.
 * Source: B. Efron, Biometrika 58 (1971), p = 2/3.
 * Accuracy: exact to 2^-53; scheduler/allocation/biased-coin.test.ts.
 * @throws RangeError when p is not in 1/2 to 1 or a count is negative
 * @example drawByBiasedCoin({ counts: [4, 6], p: 2 / 3 }, stream)
 */
export function drawByBiasedCoin(
	{ counts, p }: { counts: readonly [number, number]; p: number },
	stream: CryptographicStream
): 0 | 1 {
	requireCoin(p);
	const [first, second] = counts;
	if (!(first >= 0 && second >= 0)) throw new RangeError(`counts below 0: ${first}, ${second}`);
	if (first === second) return drawBelow(stream, 2) === 0 ? 0 : 1;
	const smaller = first < second ? 0 : 1;
	return drawWithProbability(stream, p) ? smaller : smaller === 0 ? 1 : 0;
}

/**
 * How unequal two arms are after n people: the exact distribution of the difference in size.
 *
 * Shapes: p and n in; probability of each difference 0 to n out. Units: people.
 * Method: recursion of the Markov chain of the difference.
 * Source: T. Markaryan and W. Rosenberger, Ann Stat 38 (2010), for the exact properties.
 * Accuracy: relative 1e-12; scheduler/allocation/biased-coin.test.ts, case efron-bcd-10.
 * @throws RangeError when p is not in 1/2 to 1 or n is no whole number from 0
 */
export function computeImbalances({ p, n }: { p: number; n: number }): {
	/** probability[d] of a difference of d people. */
	probabilities: number[];
	expected: number;
} {
	requireCoin(p);
	if (!Number.isInteger(n) || n < 0) throw new RangeError(`n must be a whole number, got ${n}`);
	let probabilities = [1];
	for (let person = 1; person <= n; person += 1) {
		const next = new Array<number>(person + 1).fill(0);
		probabilities.forEach((chance, difference) => {
			const grows = difference === 0 ? 1 : 1 - p;
			next[difference + 1] = (next[difference + 1] ?? 0) + chance * grows;
			if (difference > 0) next[difference - 1] = (next[difference - 1] ?? 0) + chance * p;
		});
		probabilities = next;
	}
	const expected = probabilities.reduce((sum, chance, d) => sum + chance * d, 0);
	return { probabilities, expected };
}

function requireCoin(p: number): void {
	if (!(p >= 0.5 && p <= 1)) throw new RangeError(`p must lie in 1/2 to 1, got ${p}`);
}

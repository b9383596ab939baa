import { createHash } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import { computeImbalances, drawByBiasedCoin } from './biased-coin.ts';
import { computeGuessing } from './guessing.ts';

function openStream(seed: string) {
	let counter = 0;
	return {
		nextUint32: () => {
			counter += 1;
			return createHash('sha256').update(`${seed}|${counter}`).digest().readUInt32BE(0);
		}
	};
}

describe('the biased coin', () => {
	// Method sheet E, exact recursion.
	it('leaves ten people balanced with probability .5300, forty with .5012', () => {
		const ten = computeImbalances({ p: 2 / 3, n: 10 });
		const wanted = [
			[0, 0.5300005080526341],
			[2, 0.38042981252857794],
			[4, 0.0768175582990398]
		];
		for (const [d = 0, chance = 0] of wanted) expect(ten.probabilities[d]).toBeCloseTo(chance, 12);
		expect(ten.probabilities[6]).toBeCloseTo(0.011583600060966322, 12);
		expect(ten.expected).toBeCloseTo(1.1470812376162172, 12);
		expect(computeImbalances({ p: 2 / 3, n: 40 }).probabilities[0]).toBeCloseTo(0.5012, 4);
		// A fair coin: 10 C(9, 5) / 2^9.
		expect(computeImbalances({ p: 0.5, n: 10 }).expected).toBeCloseTo(2.4609375, 12);
	});

	it('draws as the recursion says', () => {
		const stream = openStream('coin');
		let balanced = 0;
		for (let study = 0; study < 1500; study += 1) {
			const counts: [number, number] = [0, 0];
			for (let i = 0; i < 10; i += 1) counts[drawByBiasedCoin({ counts, p: 2 / 3 }, stream)] += 1;
			if (counts[0] === counts[1]) balanced += 1;
		}
		// Four standard errors.
		expect(Math.abs(balanced / 1500 - 0.53)).toBeLessThan(0.052);
	});

	it('refuses a coin that favours the larger arm', () => {
		expect(() => computeImbalances({ p: 0.4, n: 3 })).toThrow(RangeError);
		expect(() => drawByBiasedCoin({ counts: [-1, 0], p: 0.7 }, openStream('x'))).toThrow(
			RangeError
		);
	});
});

describe('guessing in a permuted block', () => {
	it.each([1, 2, 3, 5])('of two arms with %d places each is right by the closed form', (m) => {
		const got = computeGuessing([m, m]);
		let ways = 1;
		for (let i = 1; i <= m; i += 1) ways = (ways * (m + i)) / i;
		expect(got.arrangementCount).toBe(Math.round(ways));
		expect(got.excess).toBeCloseTo((4 ** m / ways - 1) / 2, 12);
		expect(got.expectedCorrect).toBeCloseTo(m + got.excess, 12);
	});

	it('of unequal arms: 2 : 1 in a block of three is right 2 1/3 times', () => {
		// aab: guess a right, a right, b sure: 3; aba: 1, 0 (tie, half), ... by hand: 7/3.
		expect(computeGuessing([2, 1]).expectedCorrect).toBeCloseTo(7 / 3, 12);
		expect(() => computeGuessing([2])).toThrow(RangeError);
	});
});

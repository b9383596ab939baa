import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { computeStandardDeviation } from './moments.ts';
import { drawNormal } from '../random/random-stream.ts';
import { createSeededStream } from '../random/seeded-stream.ts';
import { computeQuantile, estimateQn, estimateTau } from './scale-estimates.ts';

const list = fc.array(fc.integer({ min: -1000, max: 1000 }), { minLength: 4, maxLength: 30 });

describe('spreads that strays cannot pull', () => {
	it('move with the unit and not with the origin', () => {
		fc.assert(
			fc.property(list, fc.integer({ min: 1, max: 9 }), fc.integer(), (values, factor, shift) => {
				const moved = values.map((value) => factor * value + (shift % 1000));
				expect(estimateTau(moved).scale).toBeCloseTo(factor * estimateTau(values).scale, 6);
				expect(estimateQn(moved)).toBeCloseTo(factor * estimateQn(values), 6);
			})
		);
	});

	it('are the SD of normal values within 5 %, and stay so with a tenth of strays', () => {
		const stream = createSeededStream(5);
		const values = Array.from({ length: 900 }, () => drawNormal(stream));
		const sd = computeStandardDeviation(values);
		const stray = [...values, ...Array.from({ length: 90 }, () => 1000)];
		expect(estimateTau(values).scale / sd).toBeCloseTo(1, 1);
		expect(estimateQn(values) / sd).toBeCloseTo(1, 1);
		expect(estimateTau(stray).scale).toBeLessThan(1.35);
		expect(estimateQn(stray)).toBeLessThan(1.35);
		expect(Math.abs(estimateTau(stray).location)).toBeLessThan(0.1);
	});

	it('are 0 for values that are mostly the same', () => {
		expect(estimateTau([2, 2, 2, 2, 9])).toEqual({ location: 2, scale: 0 });
		expect(estimateQn([1, 1, 1, 1, 7])).toBe(0);
	});
});

describe('computeQuantile', () => {
	// quantile(c(10, 20, 40, 80), p) of R 4.2, type 7, by hand: place 3·p.
	it.each([
		[0, 10],
		[0.25, 17.5],
		[0.5, 30],
		[0.9, 68],
		[1, 80]
	])('at %d is %d', (p, wanted) => {
		expect(computeQuantile([80, 10, 40, 20], p)).toBeCloseTo(wanted, 12);
	});

	it('refuses no values and shares that are none', () => {
		expect(() => computeQuantile([], 0.5)).toThrow(RangeError);
		expect(() => computeQuantile([1], 1.5)).toThrow(RangeError);
	});
});

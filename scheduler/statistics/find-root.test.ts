import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { findRoot } from './find-root.ts';

describe('the root search', () => {
	it('finds the root of a falling or a rising function, at an end too', () => {
		expect(findRoot({ compute: (x) => x * x - 2, low: 0, high: 2 })).toBeCloseTo(Math.SQRT2, 14);
		expect(findRoot({ compute: (x) => 3 - x, low: -10, high: 10 })).toBeCloseTo(3, 13);
		expect(findRoot({ compute: (x) => x, low: 0, high: 1 })).toBe(0);
		expect(findRoot({ compute: (x) => x - 1, low: 0, high: 1 })).toBe(1);
	});

	it('finds any root of a steep and of a flat function', () => {
		const root = fc.double({ min: -50, max: 50, noNaN: true });
		const power = fc.constantFrom(1 / 3, 1, 3, 5);
		const property = fc.property(root, power, (r, p) => {
			const compute = (x: number) => Math.sign(x - r) * Math.abs(x - r) ** p;
			expect(Math.abs(findRoot({ compute, low: -61, high: 60 }) - r)).toBeLessThan(1e-12);
		});
		fc.assert(property, { seed: 71, numRuns: 200 });
	});

	it('refuses ends on one side, and what is not a number', () => {
		expect(() => findRoot({ compute: (x) => x * x + 1, low: 0, high: 2 })).toThrow(RangeError);
		expect(() => findRoot({ compute: () => NaN, low: 0, high: 2 })).toThrow(RangeError);
	});
});

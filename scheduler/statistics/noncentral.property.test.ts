import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { computeBetaTails } from './beta-distribution.ts';
import { computeChiSquareCdf } from './chi-square.ts';
import { computeFTails } from './f-distribution.ts';
import { computeGammaTails } from './gamma-distribution.ts';
import { computeNoncentralChiSquareTails } from './noncentral-chi-square.ts';
import { computeNoncentralFTails } from './noncentral-f.ts';
import { computeNoncentralTTails } from './noncentral-t.ts';

const df = fc.double({ min: 0.05, max: 5000, noNaN: true });
const ncp = fc.double({ min: 0, max: 3000, noNaN: true });
const x = fc.double({ min: 0, max: 1e5, noNaN: true });

describe('noncentral distributions', () => {
	it('have tails that add up to 1, for any arguments', () => {
		const property = fc.property(x, df, df, ncp, (value, df1, df2, lambda) => {
			const all = [
				computeNoncentralChiSquareTails(value, { df: df1, ncp: lambda }),
				computeNoncentralFTails(value, { df1, df2, ncp: lambda }),
				computeGammaTails(value, { shape: df1, rate: df2 }),
				computeBetaTails(value / 1e5, { a: df1, b: df2 })
			];
			for (const { lower, upper } of all) expect(Math.abs(lower + upper - 1)).toBeLessThan(3e-12);
		});
		fc.assert(property, { seed: 81, numRuns: 150 });
	});

	it('fall with the noncentrality and are central without it', () => {
		const property = fc.property(x, df, df, (value, df1, df2) => {
			expect(computeNoncentralFTails(value, { df1, df2, ncp: 0 })).toEqual(
				computeFTails(value, df1, df2)
			);
			const central = computeChiSquareCdf(value, df1);
			const shifted = computeNoncentralChiSquareTails(value, { df: df1, ncp: 5 }).lower;
			expect(shifted).toBeLessThanOrEqual(central + 1e-13);
		});
		fc.assert(property, { seed: 82, numRuns: 100 });
	});

	it('F with one df is the square of t', () => {
		const shift = fc.double({ min: -8, max: 8, noNaN: true });
		const t = fc.double({ min: 0.001, max: 30, noNaN: true });
		const property = fc.property(t, df, shift, (value, df2, delta) => {
			const square = computeNoncentralFTails(value * value, { df1: 1, df2, ncp: delta * delta });
			const right = computeNoncentralTTails(value, { df: df2, ncp: delta }).upper;
			const left = computeNoncentralTTails(-value, { df: df2, ncp: delta }).lower;
			expect(Math.abs(square.upper - right - left)).toBeLessThan(1e-11);
		});
		fc.assert(property, { seed: 83, numRuns: 150 });
	});

	it.each([
		['ncp below 0', () => computeNoncentralChiSquareTails(1, { df: 1, ncp: -1 })],
		['df 0', () => computeNoncentralFTails(1, { df1: 0, df2: 1, ncp: 1 })],
		['x not a number', () => computeNoncentralFTails(NaN, { df1: 1, df2: 1, ncp: 1 })],
		['rate 0', () => computeGammaTails(1, { shape: 1, rate: 0 })],
		['shape 0', () => computeBetaTails(0.5, { a: 0, b: 1 })]
	])('%s is refused', (_, call) => {
		expect(call).toThrow(RangeError);
	});
});

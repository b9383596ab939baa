import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { adjustPValues } from './multiplicity.ts';

describe('adjusted p values', () => {
	it('follow the steps worked by hand', () => {
		const p = [0.01, 0.04, 0.03, 0.005];
		const close = (values: number[]) => values.map((value) => expect.closeTo(value, 14));
		expect(adjustPValues(p, 'bonferroni')).toEqual(close([0.04, 0.16, 0.12, 0.02]));
		// Sorted .005 .01 .03 .04, times 4 3 2 1: .02 .03 .06 .04.
		expect(adjustPValues(p, 'holm')).toEqual(close([0.03, 0.06, 0.06, 0.02]));
		expect(adjustPValues(p, 'hochberg')).toEqual(close([0.03, 0.04, 0.04, 0.02]));
	});

	it('never fall below the p values, never exceed Bonferroni, and keep their order', () => {
		const list = fc.array(fc.double({ min: 0, max: 1, noNaN: true }), { minLength: 1 });
		const property = fc.property(list, (p) => {
			const [bonferroni, holm, hochberg] = (['bonferroni', 'holm', 'hochberg'] as const).map(
				(method) => adjustPValues(p, method)
			);
			p.forEach((value, i) => {
				expect(hochberg?.[i]).toBeGreaterThanOrEqual(value);
				expect(holm?.[i]).toBeGreaterThanOrEqual(hochberg?.[i] ?? NaN);
				expect(bonferroni?.[i]).toBeGreaterThanOrEqual(holm?.[i] ?? NaN);
				p.forEach((other, j) => {
					if (value < other) expect(holm?.[i]).toBeLessThanOrEqual(holm?.[j] ?? NaN);
				});
			});
		});
		fc.assert(property, { seed: 91, numRuns: 200 });
	});

	it('refuses what is no probability', () => {
		expect(() => adjustPValues([0.2, 1.2], 'holm')).toThrow(/p value 2/);
		expect(() => adjustPValues([], 'holm')).toThrow(RangeError);
	});
});

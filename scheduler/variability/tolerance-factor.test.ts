import { describe, expect, it } from 'vitest';
import { computeToleranceFactor } from './tolerance-factor.ts';

describe('computeToleranceFactor', () => {
	// Monte Carlo, numpy 2.4.6: 40 000 samples, each judged on 3000 points; standard error beside it.
	it.each([
		[5, 2, 0.5, 0.9, 8.744, 0.067],
		[8, 3, 0.9, 0.95, 42.3, 0.33],
		[10, 2, 0.9, 0.95, 15.56, 0.11],
		[12, 1, 0.9, 0.95, 7.188, 0.032],
		[15, 4, 0.95, 0.95, 29.24, 0.154],
		[30, 8, 0.9, 0.95, 27.23, 0.051],
		[40, 6, 0.9, 0.9, 15.93, 0.016],
		[60, 2, 0.9, 0.95, 6.177, 0.012]
	])(
		'%d trials of %d variables, share %d, confidence %d: Monte Carlo gives %d',
		{ timeout: 60_000 },
		(trialCount, variableCount, share, confidence, wanted, standardError) => {
			const factor = computeToleranceFactor({ trialCount, variableCount, share, confidence });
			expect(Math.abs(factor - wanted)).toBeLessThan(0.01 * wanted + 2 * standardError);
		}
	);

	it('refuses as many variables as trials, and shares that are none', () => {
		const request = { trialCount: 3, variableCount: 3, share: 0.9, confidence: 0.9 };
		expect(() => computeToleranceFactor(request)).toThrow(RangeError);
		expect(() => computeToleranceFactor({ ...request, trialCount: 9, share: 1 })).toThrow(
			RangeError
		);
	});
});

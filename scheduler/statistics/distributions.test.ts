import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
	computeChiSquareCdf,
	computeChiSquareQuantile,
	computeChiSquareSurvival
} from './chi-square.ts';
import { computeFCdf, computeFQuantile, computeFSurvival } from './f-distribution.ts';
import { computeNoncentralTCdf, computeNoncentralTTails } from './noncentral-t.ts';
import { computeNormalCdf, computeNormalQuantile } from './normal.ts';
import { computeStudentTCdf, computeStudentTQuantile } from './student-t.ts';
import {
	computeWilsonInterval,
	computeWilsonLowerBound,
	computeWilsonUpperBound
} from './wilson-interval.ts';

const df = fc.double({ min: 0.2, max: 2000, noNaN: true });
const share = fc.double({ min: 1e-6, max: 0.9, noNaN: true });

describe('quantile and distribution function undo each other for any df', () => {
	it('chi-square', () => {
		const property = fc.property(share, df, (p, degrees) => {
			expect(computeChiSquareCdf(computeChiSquareQuantile(p, degrees), degrees) / p).toBeCloseTo(
				1,
				9
			);
		});
		fc.assert(property, { seed: 61, numRuns: 200 });
	});

	it('F', () => {
		const property = fc.property(share, df, df, (p, df1, df2) => {
			expect(computeFCdf(computeFQuantile(p, df1, df2), df1, df2) / p).toBeCloseTo(1, 9);
		});
		fc.assert(property, { seed: 62, numRuns: 200 });
	});

	it('Student t and normal, which Student t nears', () => {
		const property = fc.property(share, df, (p, degrees) => {
			expect(computeStudentTCdf(computeStudentTQuantile(p, degrees), degrees) / p).toBeCloseTo(
				1,
				9
			);
			expect(computeNormalCdf(computeNormalQuantile(p)) / p).toBeCloseTo(1, 11);
		});
		fc.assert(property, { seed: 63, numRuns: 200 });
		expect(computeStudentTQuantile(0.975, 1e7)).toBeCloseTo(computeNormalQuantile(0.975), 6);
	});
});

describe('what holds everywhere', () => {
	it('the two tails add up to 1', () => {
		const x = fc.double({ min: 0, max: 1e4, noNaN: true });
		const property = fc.property(x, df, df, (value, df1, df2) => {
			const square = computeChiSquareCdf(value, df1) + computeChiSquareSurvival(value, df1);
			const ratio = computeFCdf(value, df1, df2) + computeFSurvival(value, df1, df2);
			expect([square, ratio]).toEqual([expect.closeTo(1, 12), expect.closeTo(1, 12)]);
		});
		fc.assert(property, { seed: 64, numRuns: 300 });
	});

	it('without noncentrality the noncentral t is Student t; mirrored signs mirror it', () => {
		const t = fc.double({ min: -20, max: 20, noNaN: true });
		const property = fc.property(t, df, (x, degrees) => {
			const central = computeNoncentralTCdf(x, { df: degrees, ncp: 0 });
			expect(central).toBeCloseTo(computeStudentTCdf(x, degrees), 11);
			const tails = computeNoncentralTTails(x, { df: degrees, ncp: 1.7 });
			const mirrored = computeNoncentralTTails(-x, { df: degrees, ncp: -1.7 });
			expect(tails.lower).toBeCloseTo(mirrored.upper, 12);
			expect(tails.lower + tails.upper).toBeCloseTo(1, 11);
		});
		fc.assert(property, { seed: 65, numRuns: 200 });
	});

	it('a tiny t is no trouble: the beta terms that underflow are computed afresh', () => {
		// At t = 0 half of the answer is the normal distribution function of -ncp, exactly.
		expect(computeNoncentralTCdf(1e-12, { df: 3, ncp: 2 })).toBeCloseTo(computeNormalCdf(-2), 11);
		expect(computeNoncentralTCdf(0, { df: 3, ncp: 2 })).toBeCloseTo(computeNormalCdf(-2), 14);
	});

	it('the ends are 0, 1 and infinity', () => {
		expect(computeChiSquareQuantile(0, 3)).toBe(0);
		expect(computeFQuantile(1, 3, 4)).toBe(Infinity);
		expect(computeNormalQuantile(0)).toBe(-Infinity);
		expect(computeStudentTQuantile(0.5, 3)).toBe(0);
		expect(computeFCdf(-1, 3, 4)).toBe(0);
		expect(computeChiSquareSurvival(Infinity, 3)).toBe(0);
		expect(computeStudentTCdf(-Infinity, 3)).toBe(0);
	});
});

describe('intervals of a share', () => {
	it('reach 0 and 1 exactly for none and all, and never leave them', () => {
		const none = computeWilsonInterval({ successCount: 0, trialCount: 8, level: 0.95 });
		const all = computeWilsonInterval({ successCount: 8, trialCount: 8, level: 0.95 });
		expect([none.lower, all.upper]).toEqual([0, 1]);
		expect(none.upper).toBeCloseTo(1 - all.lower, 14);
	});

	it('one-sided bounds lie inside the two-sided interval of the same level', () => {
		const counts = { successCount: 12, trialCount: 40, level: 0.95 };
		const { lower, upper } = computeWilsonInterval(counts);
		expect(computeWilsonLowerBound(counts)).toBeGreaterThan(lower);
		expect(computeWilsonUpperBound(counts)).toBeLessThan(upper);
	});
});

describe("a caller's mistake throws", () => {
	it.each([
		['df 0', () => computeChiSquareCdf(1, 0)],
		['df infinite', () => computeFQuantile(0.5, Infinity, 3)],
		['p above 1', () => computeNormalQuantile(1.1)],
		['p not a number', () => computeStudentTQuantile(NaN, 3)],
		['x not a number', () => computeFCdf(NaN, 1, 1)],
		['noncentrality beyond 10 000', () => computeNoncentralTCdf(1, { df: 3, ncp: 1e5 })],
		[
			'more successes than trials',
			() => computeWilsonInterval({ successCount: 5, trialCount: 4, level: 0.9 })
		],
		['no trial', () => computeWilsonLowerBound({ successCount: 0, trialCount: 0, level: 0.9 })],
		['level 1', () => computeWilsonUpperBound({ successCount: 1, trialCount: 4, level: 1 })]
	])('%s', (_, call) => {
		expect(call).toThrow(RangeError);
	});
});

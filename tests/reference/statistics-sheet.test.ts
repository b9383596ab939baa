import { describe, expect, it } from 'vitest';
import { computeClopperPearsonInterval } from '../../scheduler/statistics/clopper-pearson.ts';
import {
	computeDunnettCritical,
	computeDunnettPValue,
	computeLoadings,
	computeManyToOneCdf
} from '../../scheduler/statistics/dunnett.ts';

const half = (count: number) => Array.from({ length: count }, () => Math.SQRT1_2);

describe('Dunnett', () => {
	// mvtnorm 1.1-3 qmvt(both.tails), good to .003; the published table has 2.33, 2.54, 2.53.
	it.each([
		[2, 27, 2.33341544202676],
		[3, 20, 2.53820205731751],
		[4, 45, 2.53021908515644]
	])('critical value of %d comparisons, %d df', (count, df, critical) => {
		const got = computeDunnettCritical(0.05, { loadings: half(count), df, sides: 2 });
		expect(Math.abs(got - critical)).toBeLessThan(0.003);
	});

	it('published table (Dunnett 1964): three comparisons, known spread, two-sided 5 %: 2.35', () => {
		const got = computeDunnettCritical(0.05, { loadings: half(3), df: Infinity, sides: 2 });
		expect(Math.abs(got - 2.35)).toBeLessThan(0.005);
	});

	it('of one comparison is Student t: 2.0860 and 1.7247 with 20 df', () => {
		const one = { loadings: [0.7], df: 20 };
		expect(computeDunnettCritical(0.05, { ...one, sides: 2 })).toBeCloseTo(2.085963447265837, 8);
		expect(computeDunnettCritical(0.05, { ...one, sides: 1 })).toBeCloseTo(1.724718242920787, 8);
	});

	it('agrees with SciPy 1.17.1 multivariate_t.cdf at unequal sizes', () => {
		const loadings = computeLoadings([8, 15, 20], 10);
		const got = computeManyToOneCdf(2.1, { loadings, df: 12, sides: 1 });
		expect(Math.abs(got - 0.93408712)).toBeLessThan(1e-5);
		const adjusted = computeDunnettPValue(2.1, { loadings, df: 12, sides: 1 });
		expect(adjusted).toBeCloseTo(1 - got, 12);
	});
});

describe('the Clopper-Pearson interval', () => {
	it('equals R binom.test for 17 of 24', () => {
		const { lower, upper } = computeClopperPearsonInterval({
			...{ successCount: 17, trialCount: 24, level: 0.95 }
		});
		expect(lower).toBeCloseTo(0.489052186142167, 10);
		expect(upper).toBeCloseTo(0.873847911476309, 10);
	});

	it('reaches 0 and 1: none of 10 has the upper end 1 - .025^(1/10)', () => {
		const none = { successCount: 0, trialCount: 10, level: 0.95 };
		const { lower, upper } = computeClopperPearsonInterval(none);
		expect(lower).toBe(0);
		expect(upper).toBeCloseTo(1 - 0.025 ** 0.1, 12);
		expect(computeClopperPearsonInterval({ ...none, successCount: 10 }).upper).toBe(1);
	});
});

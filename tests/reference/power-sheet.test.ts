import { describe, expect, it } from 'vitest';
import { computeAnovaPower, computeMixedAnovaPower } from '../../scheduler/power/anova-power.ts';
import { reestimateBlinded } from '../../scheduler/power/blinded-reestimation.ts';
import { computeEquivalencePower } from '../../scheduler/power/equivalence-power.ts';
import { computeProportionPower } from '../../scheduler/power/proportion-power.ts';
import { countInClusters, countReplicates } from '../../scheduler/power/sample-counts.ts';
import { findSmallestN } from '../../scheduler/power/smallest-n.ts';
import {
	computeAncovaPower,
	computeOneSampleTPower,
	computeSlopePower,
	computeTPower
} from '../../scheduler/power/t-power.ts';
import { approximateWelchPower, computeWelchPower } from '../../scheduler/power/welch-power.ts';

const TEST = { alpha: 0.05, sides: 2 } as const;

function twoGroups(d: number, n: number, more: { alpha: number; sides: 1 | 2; strict?: boolean }) {
	return computeTPower({ ncp: d * Math.sqrt(n / 2), df: 2 * n - 2, ...more });
}

describe('t tests, R 4.2.2 power.t.test and pwr 1.3-0', () => {
	it('two-sided, both tails counted (strict = TRUE)', () => {
		const wanted = [0.0755408622827304, 0.216143073489247, 0.465759288302923, 0.802078791767253];
		[0.2, 0.5, 0.8, 1.2].forEach((d, i) => {
			expect(twoGroups(d, 12, TEST)).toBeCloseTo(wanted[i] ?? NaN, 9);
		});
	});

	it('paired: 33.367204088022 pairs for d .5 and power .8 (one tail, as power.t.test counts)', () => {
		const found = findSmallestN({
			computePower: (n) => computeOneSampleTPower({ ...TEST, effectSize: 0.5, n, strict: false }),
			...{ power: 0.8, smallest: 2 }
		});
		expect(found).toMatchObject({ ok: true, n: 34 });
		expect((found.ok ? found.exactN : NaN) / 33.367204088022).toBeCloseTo(1, 7);
	});

	it('one-sided', () => {
		const power = twoGroups(0.7, 15, { alpha: 0.025, sides: 1 });
		expect(power).toBeCloseTo(0.456686926598749, 9);
	});

	it.each([
		[0.2, 393.405696021649],
		[0.5, 63.7656104441418],
		[0.8, 25.524581615622]
	])('pwr.t.test needs n for d %d', (d, n) => {
		const computePower = (m: number) => twoGroups(d, m, TEST);
		const found = findSmallestN({ computePower, power: 0.8, smallest: 2 });
		// R's own root search stops at about 4e-7.
		expect((found.ok ? found.exactN : NaN) / n).toBeCloseTo(1, 6);
	});
});

describe('Welch’s test, method sheet E (quadrature over both variances)', () => {
	const design = { ...TEST, n1: 15, n2: 25, sd1: 1, sd2: 2, difference: 1.2 };
	it('exact and approximate power', () => {
		// The sheet's own quadrature has 0.68874536; 200 × 200 Gauss-Legendre points with SciPy 1.17.1
		// chi2.pdf, norm.sf and t.isf have this.
		expect(computeWelchPower(design)).toBeCloseTo(0.6887448560448861, 10);
		const small = { ...TEST, n1: 6, n2: 9, sd1: 1, sd2: 3, difference: 2.5 };
		expect(Math.abs(computeWelchPower(small) - 0.5531571098476449)).toBeLessThan(5e-9);
		const { power, df } = approximateWelchPower(design);
		expect(power).toBeCloseTo(0.6896709470452335, 9);
		expect(df).toBeCloseTo(37.11926605504588, 9);
	});

	it('without a difference is the type I error, close to alpha, and symmetric in the groups', () => {
		const none = computeWelchPower({ ...design, difference: 0 });
		expect(Math.abs(none - 0.05)).toBeLessThan(0.002);
		const turned = { ...design, n1: 25, n2: 15, sd1: 2, sd2: 1 };
		expect(computeWelchPower(turned)).toBeCloseTo(computeWelchPower(design), 10);
	});
});

describe('analysis of variance', () => {
	it.each([
		[3, 20, 0.25, 0.37443107631935],
		[4, 15, 0.4, 0.708721641897684],
		[5, 10, 0.3, 0.324534032874174]
	])('%d groups of %d, f %d (pwr.anova.test)', (groupCount, n, f, power) => {
		const got = computeAnovaPower({ groupCount, totalN: n * groupCount, f, alpha: 0.05 });
		expect(got).toBeCloseTo(power, 9);
	});

	it('mixed: within the error of a Monte Carlo run in R (20 000 replicates)', () => {
		const design = {
			groupCount: 2,
			measurementCount: 4,
			totalN: 40,
			correlation: 0.5,
			alpha: 0.05
		};
		const between = computeMixedAnovaPower({ ...design, f: 0.25, effect: 'between' });
		const interaction = computeMixedAnovaPower({ ...design, f: 0.15, effect: 'interaction' });
		expect(Math.abs(between - 0.4908)).toBeLessThan(0.012);
		expect(Math.abs(interaction - 0.5913)).toBeLessThan(0.012);
		// Method sheet E, the formula by R pf.
		expect(between).toBeCloseTo(0.496, 3);
		expect(interaction).toBeCloseTo(0.587, 3);
	});
});

describe('covariates, slopes, shares, equivalence', () => {
	// SciPy 1.17.1: nct.sf(t.ppf(.975, df), df, ncp) + nct.cdf(-t.ppf(.975, df), df, ncp).
	it('a covariate: df 57, ncp .5 / .8 √15', () => {
		const power = computeAncovaPower({
			...TEST,
			effectSize: 0.5,
			n1: 30,
			n2: 30,
			correlation: 0.6
		});
		expect(power).toBeCloseTo(0.6626580468618867, 9);
	});

	it('a slope for each person: df 38, ncp .3 / √(2 / 20 (.16 + 1 / 17.5))', () => {
		const power = computeSlopePower({
			...{ ...TEST, slopeDifference: 0.3, n1: 20, n2: 20, times: [0, 1, 2, 3, 4, 5] },
			...{ slopeSd: 0.4, residualSd: 1 }
		});
		expect(power).toBeCloseTo(0.5097439254264463, 9);
	});

	it('two shares: R power.prop.test, power and n for .9', () => {
		const design = { ...TEST, p1: 0.5, p2: 0.75, method: 'normal', strict: false } as const;
		const power = computeProportionPower({ ...design, n1: 50, n2: 50 });
		expect(power).toBeCloseTo(0.740165901331388, 9);
		const found = findSmallestN({
			computePower: (n) => computeProportionPower({ ...design, n1: n, n2: n }),
			...{ power: 0.9, smallest: 2 }
		});
		expect((found.ok ? found.exactN : NaN) / 76.7069301141077).toBeCloseTo(1, 6);
	});

	it('two shares by the arcsine: norm.sf(z - h √25) + norm.cdf(-z - h √25), SciPy 1.17.1', () => {
		const design = { ...TEST, p1: 0.5, p2: 0.75, method: 'arcsine', n1: 50, n2: 50 } as const;
		expect(computeProportionPower(design)).toBeCloseTo(0.744742886391247, 10);
	});

	it.each([
		[20, 0, 0.8, false, 0.5988169643764483],
		[30, 0.1, 0.8, false, 0.8135724706112729],
		[12, 0, 0.9, true, 0.7970102752021704],
		[10, 0, 0.5, false, 0.0009725035583374532]
	] as const)(
		'equivalence, n %d, difference %d, margin %d, paired %s (method sheet E)',
		(...row) => {
			const [n, trueDifference, margin, paired, power] = row;
			const design = {
				trueDifference,
				lowerMargin: -margin,
				upperMargin: margin,
				sd: 1,
				alpha: 0.05
			};
			const people = paired ? { paired, n } : { paired, n1: n, n2: n };
			expect(computeEquivalencePower({ ...design, ...people })).toBeCloseTo(power, 6);
		}
	);
});

describe('counts', () => {
	it('replicates for a half width: ⌈z² p (1 - p) / h²⌉', () => {
		const rows = [
			[0.8, 0.01, 6147],
			[0.9, 0.01, 3458],
			[0.05, 0.005, 7299]
		] as const;
		for (const [p, halfWidth, count] of rows)
			expect(countReplicates({ p, halfWidth, level: 0.95 })).toBe(count);
	});

	it('clusters: 1 + (m - 1) ICC', () => {
		expect(countInClusters(400, { clusterSize: 20, icc: 0.05 }).totalCount).toBe(781);
		expect(countInClusters(400, { clusterSize: 60, icc: 0.3 }).totalCount).toBe(7480);
	});

	it('blinded re-estimation (method sheet E)', () => {
		const pooledValues = [
			...[9.1, 8.4, 10.2, 7.7, 11.5, 9.9, 8.8, 12.1, 10.7, 6.9],
			...[9.4, 10.1, 8.2, 11.9, 9.6, 7.3, 10.8, 8.9, 9.7, 11.1]
		];
		const got = reestimateBlinded({ pooledValues, difference: 1.5, alpha: 0.05, power: 0.9 });
		expect(got).toMatchObject({
			pooledVariance: expect.closeTo(2.19818421052632, 12),
			adjustedVariance: expect.closeTo(1.60607894736842, 12),
			...{ perGroupNormal: 21, perGroupNormalAdjusted: 16, perGroupT: 22, perGroup: 22 }
		});
	});
});

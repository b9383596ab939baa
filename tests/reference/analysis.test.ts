import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { analyseCovariance } from '../../scheduler/analysis/ancova.ts';
import { testEquivalence } from '../../scheduler/analysis/equivalence.ts';
import { analyseMixed } from '../../scheduler/analysis/mixed-anova.ts';
import { analyseOneWay } from '../../scheduler/analysis/one-way-anova.ts';
import {
	testOneSample,
	testPaired,
	testTwoSample,
	testWelch,
	type TTestResult
} from '../../scheduler/analysis/t-tests.ts';
import { compareProportions } from '../../scheduler/analysis/two-proportions.ts';
import { readDataset } from './reference-values.ts';

// By SciPy 1.17.1 and numpy least squares; see make-analysis.py beside this file.
type Test = { t: number; df: number; p: number; lower: number; upper: number };
const data: {
	groups: [number[], number[], number[]];
	oneSample: Test;
	paired: Test;
	pooled: Test;
	welch: Test;
	oneWay: { f: number; p: number; welchF: number; welchP: number };
	fisher: number;
	ancova: Record<string, number> & {
		y: number[];
		x: number[];
		group: number[];
		difference: number[];
		standardError: number[];
	};
	mixed: Record<string, number> & { people: { group: number; values: number[] }[] };
} = JSON.parse(readFileSync(new URL('data/analysis.json', import.meta.url), 'utf8'));
const [a, b, c] = data.groups;

function expectTest(got: TTestResult, wanted: Test): void {
	if (!got.ok) throw new Error(got.reason);
	const { t, df, p, interval } = got;
	expectNear([t, df, p], [wanted.t, wanted.df, wanted.p]);
	expectNear([interval.lower, interval.upper], [wanted.lower, wanted.upper]);
}

function expectNear(
	got: readonly number[],
	wanted: readonly (number | undefined)[],
	digits = 1e-10
) {
	expect(got).toHaveLength(wanted.length);
	got.forEach((value, i) => {
		const ratio = value / (wanted[i] ?? Number.NaN);
		expect(Math.abs(ratio - 1), `${value} for ${wanted[i]}`).toBeLessThan(digits);
	});
}

describe('t tests', () => {
	it('sleep data: documented t = -1.8608, df = 17.776; paired t = -4.0621 (R t.test)', () => {
		const rows = readDataset('sleep_extra', ['extra', 'group']);
		const of = (group: number) => rows.flatMap(([x = NaN, g]) => (g === group ? [x] : []));
		expectTest(testWelch(of(1), of(2)), {
			...{ t: -1.86081346748685, df: 17.7764735161785, p: 0.0793941401873582 },
			...{ lower: -3.36548323071171, upper: 0.20548323071171 }
		});
		const paired = testPaired(of(1), of(2));
		if (!paired.ok) throw new Error(paired.reason);
		expectNear([paired.t, paired.df, paired.p], [-4.06212767768169, 9, 0.00283289019738427], 2e-7);
	});

	it('scipy.stats.ttest_1samp, ttest_rel, ttest_ind with and without equal variances', () => {
		expectTest(testOneSample(a, { nullValue: 9.5 }), data.oneSample);
		expectTest(testPaired(b.slice(0, 9), a), data.paired);
		expectTest(testTwoSample(a, b), data.pooled);
		expectTest(testWelch(a, b, { level: 0.9 }), data.welch);
	});

	it('one-sided: half the two-sided p on the side of the difference', () => {
		const two = testWelch(a, b);
		const less = testWelch(a, b, { alternative: 'less', level: 0.975 });
		if (!two.ok || !less.ok) throw new Error('no test');
		expect(two.t).toBeLessThan(0);
		expect(less.p).toBeCloseTo(two.p / 2, 14);
		expect(less.interval.lower).toBe(-Infinity);
		expect(less.interval.upper).toBeCloseTo(two.interval.upper, 12);
	});

	it('equivalence: both one-sided tests of scipy.stats.ttest_ind with shifted values', () => {
		const got = testEquivalence(a, b, {
			...{ design: 'pooled', lowerMargin: -4, upperMargin: 4, alpha: 0.05 }
		});
		const above = testTwoSample(a, b, { nullValue: -4, alternative: 'greater' });
		const below = testTwoSample(a, b, { nullValue: 4, alternative: 'less' });
		if (!got.ok || !above.ok || !below.ok) throw new Error('no test');
		expect([got.above.p, got.below.p]).toEqual([above.p, below.p]);
		expect(got.isEquivalent).toBe(got.interval.lower > -4 && got.interval.upper < 4);
	});
});

describe('analysis of variance', () => {
	it('scipy.stats.f_oneway, also with equal_var=False', () => {
		const got = analyseOneWay([a, b, c]);
		if (!got.ok) throw new Error(got.reason);
		const { oneWay } = data;
		const values = [got.test.f, got.test.p, got.welch?.f ?? NaN, got.welch?.p ?? NaN];
		expectNear(values, [oneWay.f, oneWay.p, oneWay.welchF, oneWay.welchP]);
	});

	it('growth data, sex between and age within: F 9.29, 35.35, 2.36, epsilon .8672', () => {
		const { mixed } = data;
		const got = analyseMixed(mixed.people);
		if (!got.ok || !got.between || !got.interaction) throw new Error('no test');
		expectNear([got.between.f, got.between.p], [mixed.between, mixed.betweenP]);
		expectNear([got.within.f, got.interaction.f], [mixed.within, mixed.interaction]);
		expectNear([got.interaction.p], [mixed.interactionP]);
		expectNear([got.epsilon.greenhouseGeisser], [mixed.epsilon]);
		expectNear([got.interaction.greenhouseGeisser.p], [mixed.interactionGg]);
		// Lecoutre's formula: (26 · 3 e - 2) / (3 (25 - 3 e)) with e = .86720.
		expect(got.epsilon.huynhFeldt).toBeCloseTo(0.97688, 5);
	});

	it('covariance: nested least squares by numpy', () => {
		const { ancova } = data;
		const got = analyseCovariance({ y: ancova.y, group: ancova.group, covariates: [ancova.x] });
		if (!got.ok) throw new Error(got.reason);
		expectNear(
			[got.groups.f, got.groups.p, got.groups.df2],
			[...[ancova.groupF, ancova.groupP, ancova.df]]
		);
		expectNear([got.covariates[0]?.f ?? NaN], [ancova.covariateF]);
		expectNear(
			[got.slopesDiffer?.f ?? NaN, got.slopesDiffer?.p ?? NaN],
			[...[ancova.slopesF, ancova.slopesP]]
		);
		expectNear(
			got.differences.map(({ estimate }) => estimate),
			ancova.difference
		);
		expectNear(
			got.differences.map(({ standardError }) => standardError),
			ancova.standardError
		);
		expectNear(got.adjustedMeans.slice(0, 1), [ancova.adjustedMean]);
	});
});

describe('two shares', () => {
	it('scipy.stats.fisher_exact([[3, 11], [10, 4]])', () => {
		const got = compareProportions({ successes: [3, 10], trials: [14, 14] });
		expectNear([got.fisherP], [data.fisher]);
		expect(got.oddsRatio).toBeCloseTo((3 * 4) / (11 * 10), 14);
	});

	it('Newcombe 1998, table II, method 10: 56 of 70 against 48 of 80 has .0524 to .3339', () => {
		const got = compareProportions({ successes: [56, 48], trials: [70, 80] });
		expect(Math.abs(got.differenceInterval.lower - 0.0524)).toBeLessThan(5e-5);
		expect(Math.abs(got.differenceInterval.upper - 0.3339)).toBeLessThan(5e-5);
	});
});

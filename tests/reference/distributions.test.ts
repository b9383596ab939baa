import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import {
	computeChiSquareCdf,
	computeChiSquareQuantile,
	computeChiSquareSurvival
} from '$scheduler/statistics/chi-square.ts';
import {
	computeFCdf,
	computeFQuantile,
	computeFSurvival
} from '$scheduler/statistics/f-distribution.ts';
import { computeLogGamma } from '$scheduler/statistics/log-gamma.ts';
import {
	computeNoncentralTCdf,
	computeNoncentralTSurvival
} from '$scheduler/statistics/noncentral-t.ts';
import {
	computeNormalCdf,
	computeNormalQuantile,
	computeNormalSurvival
} from '$scheduler/statistics/normal.ts';
import {
	computeStudentTCdf,
	computeStudentTQuantile,
	computeStudentTSurvival
} from '$scheduler/statistics/student-t.ts';
import {
	computeWilsonInterval,
	computeWilsonLowerBound,
	computeWilsonUpperBound
} from '$scheduler/statistics/wilson-interval.ts';

// Tail probabilities by mpmath with 30 to 50 digits, cross-checked with SciPy: make-distributions.py.
const { cases } = readJson<DistributionCases>('distributions.json');
// Values printed by R 4.2.2 with the function named in each case.
const fromR = readJson<{ cases: RCases }>('r-distributions-and-power.json').cases;

const RELATIVE = 1e-10;

describe('tail probabilities agree with mpmath to a relative 1e-10 in both tails', () => {
	it.each(cases.normal)('normal at $x', ({ x, lower, upper }: TailCase) => {
		expectRelative(computeNormalCdf(x), lower);
		expectRelative(computeNormalSurvival(x), upper);
	});
	it.each(cases.chiSquare)('chi-square, $df df, at $x', ({ x, df, lower, upper }: TailCase) => {
		expectRelative(computeChiSquareCdf(x, df), lower);
		expectRelative(computeChiSquareSurvival(x, df), upper);
	});
	it.each(cases.f)('F, $df1 and $df2 df, at $x', ({ x, df1, df2, lower, upper }: TailCase) => {
		expectRelative(computeFCdf(x, df1, df2), lower);
		expectRelative(computeFSurvival(x, df1, df2), upper);
	});
	it.each(cases.studentT)('Student t, $df df, at $x', ({ x, df, lower, upper }: TailCase) => {
		expectRelative(computeStudentTCdf(x, df), lower);
		expectRelative(computeStudentTSurvival(x, df), upper);
	});
});

describe('quantiles bring back the point whose tail was given', () => {
	it.each(cases.normalQuantile)('normal at p $p', ({ p, x }: { p: number; x: number }) => {
		expectRelative(computeNormalQuantile(p), x, 1e-14);
	});
	it.each(cases.chiSquare.filter(isLowerTail))('chi-square, $df df, at $lower', (c: TailCase) => {
		expectRelative(computeChiSquareQuantile(c.lower, c.df), c.x);
	});
	it.each(cases.f.filter(isLowerTail))('F, $df1 and $df2 df, at $lower', (c: TailCase) => {
		expectRelative(computeFQuantile(c.lower, c.df1, c.df2), c.x);
	});
	it.each(cases.studentT.filter(isLowerTail))('Student t, $df df, at $lower', (c: TailCase) => {
		expectRelative(computeStudentTQuantile(c.lower, c.df), c.x);
	});
});

describe('noncentral t agrees with the integral that defines it, absolute 1e-11', () => {
	it.each(cases.noncentralT)(
		'$df df, noncentrality $ncp, at $x',
		(c: TailCase & { ncp: number }) => {
			const distribution = { df: c.df, ncp: c.ncp };
			expect(Math.abs(computeNoncentralTCdf(c.x, distribution) - c.lower)).toBeLessThan(1e-11);
			expect(Math.abs(computeNoncentralTSurvival(c.x, distribution) - 1 + c.lower)).toBeLessThan(
				1e-11
			);
		}
	);
});

describe('values of R 4.2.2', () => {
	it('chi-square quantiles equal qchisq', () => {
		const { inputs, expected } = fromR['quantile-chisq'];
		inputs.p.forEach((p: number, i: number) => {
			expectRelative(computeChiSquareQuantile(p, at(inputs.df, i)), at(expected.q, i), 1e-9);
		});
	});
	it('Student t quantiles equal qt', () => {
		const { inputs, expected } = fromR['quantile-t'];
		inputs.p.forEach((p: number, i: number) => {
			expectRelative(computeStudentTQuantile(p, at(inputs.df, i)), at(expected.q, i), 1e-8);
		});
	});
	it('the Wilson interval equals prop.test without continuity correction', () => {
		const { inputs, expected } = fromR['binomial-intervals'];
		const share = { successCount: inputs.x, trialCount: inputs.n };
		const { lower, upper } = computeWilsonInterval({ ...share, level: inputs.level });
		expect(Math.abs(lower - expected.wilson[0])).toBeLessThan(1e-7);
		expect(Math.abs(upper - expected.wilson[1])).toBeLessThan(1e-7);
		expect(computeWilsonLowerBound({ ...share, level: 0.975 })).toBeCloseTo(lower, 14);
		expect(computeWilsonUpperBound({ ...share, level: 0.975 })).toBeCloseTo(upper, 14);
	});
	it('log gamma of one half is the log of the square root of pi', () => {
		expectRelative(computeLogGamma(0.5), Math.log(Math.PI) / 2, 1e-14);
		expectRelative(computeLogGamma(171), Math.log(7.257415615307994e306), 1e-15);
	});
});

type DistributionCases = {
	cases: {
		normal: TailCase[];
		normalQuantile: { p: number; x: number }[];
		chiSquare: TailCase[];
		f: TailCase[];
		studentT: TailCase[];
		noncentralT: (TailCase & { ncp: number })[];
	};
};

type RCases = {
	'quantile-chisq': QuantileCase;
	'quantile-t': QuantileCase;
	'binomial-intervals': {
		inputs: { x: number; n: number; level: number };
		expected: { wilson: [number, number] };
	};
};

type QuantileCase = { inputs: { p: number[]; df: number[] }; expected: { q: number[] } };

type TailCase = { x: number; df: number; df1: number; df2: number; lower: number; upper: number };

function at(values: readonly number[], index: number): number {
	const value = values[index];
	if (value === undefined) throw new RangeError(`the case has no value ${index}`);
	return value;
}

/** Near 1 a probability has too few digits left to lead back to its point. */
function isLowerTail({ lower }: TailCase): boolean {
	return lower > 0 && lower < 0.6;
}

function expectRelative(got: number, expected: number, relative = RELATIVE): void {
	const error = expected === 0 ? Math.abs(got) : Math.abs(got / expected - 1);
	expect(error, `got ${got}, expected ${expected}`).toBeLessThanOrEqual(relative);
}

function readJson<Content>(name: string): Content {
	return JSON.parse(readFileSync(new URL(`data/${name}`, import.meta.url), 'utf8'));
}

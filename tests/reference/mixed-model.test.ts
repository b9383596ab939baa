import { describe, expect, it } from 'vitest';
import {
	fitMixedModel,
	type MixedModelFit
} from '../../scheduler/analysis/mixed-model/fit-mixed-model.ts';
import { computeKenwardRoger } from '../../scheduler/analysis/mixed-model/kenward-roger.ts';
import { createSatterthwaite } from '../../scheduler/analysis/mixed-model/satterthwaite.ts';
import { readDataset } from './reference-values.ts';

const ones = (values: readonly unknown[]) => values.map(() => 1);
const column = (rows: readonly number[][], i: number) => rows.map((row) => row[i] ?? Number.NaN);
const standardErrors = ({ covariance }: MixedModelFit) =>
	covariance.map((row, i) => Math.sqrt(row[i] ?? Number.NaN));
const listDf = (fit: MixedModelFit) => {
	const compute = createSatterthwaite(fit.solution);
	return fit.coefficients.map((_, i) => compute(fit.coefficients.map((__, j) => Number(i === j))));
};

function fit(...options: Parameters<typeof fitMixedModel>): MixedModelFit {
	const result = fitMixedModel(...options);
	if (!result.ok) throw new Error(result.reason);
	return result;
}

function expectNear(got: readonly (number | null)[], wanted: readonly number[], relative: number) {
	expect(got).toHaveLength(wanted.length);
	wanted.forEach((value, i) => {
		expect(Math.abs(Number(got[i]) / value - 1), `${got[i]} for ${value}`).toBeLessThan(relative);
	});
}

// Belenky et al. 2003, as lme4 1.1-31 carries it; values of lme4, lmerTest 3.1-3, pbkrtest 0.5.2.
describe('sleepstudy', () => {
	const rows = readDataset('sleepstudy', ['Reaction', 'Days', 'Subject']);
	const [y, days, group] = [column(rows, 0), column(rows, 1), column(rows, 2)];
	const fixed = [ones(y), days];

	it('random intercept', () => {
		const got = fit({ y, fixed, group, random: [ones(y)] }, 'REML');
		expect(got.criterion).toBeLessThanOrEqual(1786.46508539492 + 1e-8);
		expectNear(got.coefficients, [251.405104848484, 10.467285959596], 1e-10);
		expectNear(standardErrors(got), [9.74671626920939, 0.80422142894524], 2e-8);
		expectNear([...got.randomSds, got.residualSd], [37.1238267667686, 30.9912338986441], 2e-8);
		expectNear(listDf(got), [22.8101989552553, 161], 1e-6);
		const adjusted = computeKenwardRoger(got.solution);
		if (!adjusted.ok) throw new Error(adjusted.reason);
		const tests = [
			[1, 0],
			[0, 1]
		].map((contrast) => adjusted.test([contrast]));
		expectNear(
			tests.map(({ df }) => df),
			[22.8101990921784, 161],
			1e-7
		);
		expectNear(
			adjusted.covariance.map((row, i) => Math.sqrt(row[i] ?? 0)),
			[9.74671626920939, 0.80422142894524],
			2e-8
		);
	});

	it('random intercept and slope: the published estimates', () => {
		const got = fit({ y, fixed, group, random: fixed }, 'REML');
		// Published: 251.405, 10.467, SD 24.741 and 5.922, correlation .066, residual 25.592, criterion
		// 1743.628; the criterion at more digits by lme4 is 1743.628272.
		expect(got.criterion).toBeLessThanOrEqual(1743.628272 + 5e-7);
		expectNear(got.coefficients, [251.4051, 10.46729], 5e-7);
		expectNear(standardErrors(got), [6.82456, 1.54579], 2e-6);
		expectNear([...got.randomSds, got.residualSd], [24.741, 5.922, 25.592], 3e-5);
		expect(got.randomCorrelation).toBeCloseTo(0.066, 3);
		expectNear(listDf(got), [17, 17], 1e-5);
		expect(got.isSingular).toBe(false);
		const adjusted = computeKenwardRoger(got.solution);
		if (!adjusted.ok) throw new Error(adjusted.reason);
		// With everybody measured alike the adjusted degrees of freedom are those of 18 people.
		expectNear([adjusted.test([[0, 1]]).df], [17], 1e-9);
	});

	it('full likelihood', () => {
		const got = fit({ y, fixed, group, random: fixed }, 'ML');
		expect(-2 * -875.969672244495).toBeGreaterThanOrEqual(got.criterion - 1e-8);
		expectNear(standardErrors(got), [6.63212274219029, 1.50223021383204], 1e-4);
		expectNear(
			[...got.randomSds, got.residualSd],
			[23.779759589458, 5.71679851392829, 25.591907036487],
			1e-4
		);
		expectNear(
			[got.logLikelihood, got.aic, got.bic],
			[-875.969672, 1763.939344, 1783.097086],
			1e-8
		);
	});
});

describe('growth of the distance (Potthoff and Roy 1964)', () => {
	const rows = readDataset('orthodont', ['distance', 'age', 'Subject_index', 'male']);
	const [y, group, male] = [column(rows, 0), column(rows, 2), column(rows, 3)];
	const age = column(rows, 1).map((value) => value - 11);
	const both = age.map((value, i) => value * (male[i] ?? 0));

	it('random intercept and slope, lines by sex', () => {
		const fixed = [ones(y), age, male, both];
		const got = fit({ y, fixed, group, random: [ones(y), age] }, 'REML');
		expect(got.criterion).toBeLessThanOrEqual(432.581661502719 + 1e-8);
		expectNear(
			got.coefficients,
			[22.6477272727271, 0.479545454545451, 2.32102272727282, 0.304829545454548],
			1e-9
		);
		const se = [0.586138809953743, 0.10371920194868, 0.761416649345881, 0.134735195621708];
		expectNear(standardErrors(got), se, 2e-6);
		expectNear(
			[...got.randomSds, got.randomCorrelation, got.residualSd],
			[1.83032627589625, 0.18034441120824, 0.206435575598553, 1.31004041714395],
			1e-4
		);
		expectNear(listDf(got), [25, 25, 25, 25], 1e-6);
		const adjusted = computeKenwardRoger(got.solution);
		if (!adjusted.ok) throw new Error(adjusted.reason);
		expectNear([adjusted.test([[0, 0, 0, 1]]).df], [25], 1e-9);
	});
});

it('identical people: a singular fit that equals least squares (lme4)', () => {
	const y = Array.from({ length: 36 }, (_, i) => [1.01, -0.99, 0.49, -0.51, 0.2, -0.2][i % 6] ?? 0);
	const x = y.map((_, i) => i % 6);
	const group = y.map((_, i) => Math.floor(i / 6));
	const fixed = [ones(y), x];
	for (const random of [[ones(y)], fixed]) {
		const got = fit({ y, fixed, group, random }, 'REML');
		expect(got.isSingular).toBe(true);
		expectNear(got.coefficients, [0.248571428571429, -0.0994285714285714], 1e-9);
		expect(got.residualSd).toBeCloseTo(0.651793131073261, 9);
		expect(got.randomSds.every((sd) => sd < 1e-6)).toBe(true);
		expect(got.randomCorrelation).toBeNull();
	}
});

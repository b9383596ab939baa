import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { computeSymmetricEigen } from '../../scheduler/linear-algebra/symmetric-eigen.ts';
import { computeEllipsoid } from '../../scheduler/variability/compute-ellipsoid.ts';
import {
	computeCovarianceDistance,
	computeLogVolumeRatio
} from '../../scheduler/variability/covariance-distance.ts';
import {
	computeCoverageFactor,
	computeMeanFactor,
	computeNextTrialFactor
} from '../../scheduler/variability/ellipsoid-factors.ts';
import { computeSeparation } from '../../scheduler/variability/ellipsoid-separation.ts';
import { computeMassInside } from '../../scheduler/variability/mass-inside.ts';
import { computeSquaredDistances } from '../../scheduler/variability/mahalanobis.ts';
import { computeCovariance, computeMeanVector } from '../../scheduler/variability/moments.ts';
import { computeTrendSlopes, testTrend } from '../../scheduler/variability/stationarity.ts';
import { computeToleranceFactor } from '../../scheduler/variability/tolerance-factor.ts';
import { findCase, matrix, numbers, readDataset } from './reference-values.ts';
import { expectNumbers } from './expect-numbers.ts';

function describeCloud(executions: number[][], factor: number) {
	const mean = computeMeanVector(executions);
	const covariance = computeCovariance(executions);
	return { mean, covariance, ...computeEllipsoid({ mean, covariance, factor }) };
}

/** Angle of the longest half axis, degrees, modulo 180. */
function angleOf({ directions }: { directions: readonly (readonly number[])[] }): number {
	const [x = 0, y = 0] = directions[0] ?? [];
	return ((Math.atan2(y, x) * 180) / Math.PI + 180) % 180;
}

describe('ellipsoids against R', () => {
	it('covers 95 % of a normal population: faithful', () => {
		const { inputs, expected, tolerance } = findCase('ellipse-faithful-chi2-95');
		const executions = readDataset('faithful', z.array(z.string()).parse(inputs['columns']));
		const factor = computeCoverageFactor({ variableCount: 2, probability: 0.95 });
		const cloud = describeCloud(executions, factor);
		expectNumbers(cloud.mean, expected['mean'], tolerance);
		expectNumbers(cloud.covariance, expected['cov'], tolerance);
		expectNumbers(cloud.halfAxes, expected['half_axes'], tolerance);
		expectNumbers(angleOf(cloud), expected['major_axis_angle_deg'], tolerance);
		expectNumbers(cloud.volume, expected['volume'], tolerance);
		const distances = computeSquaredDistances({
			executions,
			center: cloud.mean,
			covariance: cloud.covariance
		});
		const values = distances.ok ? distances.values : [];
		expect(values.filter((value) => value <= factor)).toHaveLength(Number(expected['inside']));
		expectNumbers(Math.max(...values), expected['max_mahalanobis_sq'], tolerance);
	});

	it('holds the mean with 95 % confidence: iris setosa', () => {
		const { inputs, expected, tolerance } = findCase('ellipse-setosa-mean-95');
		const executions = readDataset('iris_setosa', z.array(z.string()).parse(inputs['columns']));
		const factor = computeMeanFactor({ trialCount: 50, variableCount: 2, probability: 0.95 });
		const cloud = describeCloud(executions, factor);
		expectNumbers(factor, expected['c2'], tolerance);
		expectNumbers(cloud.halfAxes, expected['half_axes'], tolerance);
		expectNumbers(angleOf(cloud), expected['major_axis_angle_deg'], tolerance);
		expectNumbers(cloud.volume, expected['volume'], tolerance);
	});

	it('has the volume of a four-dimensional ball: iris setosa', () => {
		const { expected, tolerance } = findCase('ellipsoid-setosa-4d-volume');
		const executions = readDataset('iris_setosa');
		expectNumbers(describeCloud(executions, 1).volume, expected['volume'], tolerance);
		const { values } = computeSymmetricEigen(computeCovariance(executions));
		expectNumbers([...values].reverse(), expected['eigenvalues'], tolerance);
	});

	it('holds the next trial', () => {
		const { inputs, expected, tolerance } = findCase('ellipsoid-factor-prediction');
		const [n, d] = [numbers.parse(inputs['n']), numbers.parse(inputs['d'])];
		const factors = n.map((trialCount, i) =>
			computeNextTrialFactor({ trialCount, variableCount: d[i] ?? 0, probability: 0.95 })
		);
		expectNumbers(factors, expected['c2'], tolerance);
	});
});

/** Half a second of work for each factor, more on a busy machine. */
const SLOW = { timeout: 60_000 };

describe('tolerance factor', () => {
	it('holds a share of the population with confidence, as Monte Carlo in R does', SLOW, () => {
		const { inputs, expected, tolerance } = findCase('ellipsoid-factor-tolerance');
		const read = (name: string) => numbers.parse(inputs[name]);
		const [d, beta, gamma] = [read('d'), read('beta'), read('gamma')];
		const factors = read('n').map((trialCount, i) =>
			computeToleranceFactor({
				...{ trialCount, variableCount: d[i] ?? 0 },
				...{ share: beta[i] ?? 0, confidence: gamma[i] ?? 0 }
			})
		);
		expectNumbers(factors, expected['c2'], tolerance);
	});
});

describe('mass inside a region', () => {
	it.each(['mass-shifted', 'mass-3d'])('%s agrees with quadrature and Imhof inversion', (id) => {
		const { inputs, expected, tolerance } = findCase(id);
		const mass = computeMassInside({
			mean: numbers.parse(inputs['mean']),
			covariance: matrix.parse(inputs['cov']),
			center: numbers.parse(inputs['center']),
			shape: matrix.parse(inputs['shape'])
		});
		expectNumbers(mass.ok ? mass.probability : NaN, expected['probability'], tolerance);
	});

	it('is a chi-square probability when both have one center and one shape', () => {
		const covariance = [
			[2, 0.5],
			[0.5, 1]
		];
		const shape = covariance.map((values) => values.map((value) => value * 3));
		const mass = computeMassInside({ mean: [1, 2], covariance, center: [1, 2], shape });
		// F of chi-square with 2 degrees of freedom at 3: 1 - exp(-1.5).
		expectNumbers(mass.ok ? mass.probability : NaN, 1 - Math.exp(-1.5), { abs: 1e-11 });
	});
});

describe('distances and separation of clouds', () => {
	it.each(['cov-distance-2d', 'cov-distance-3d'])('%s agrees with SciPy', (id) => {
		const { inputs, expected, tolerance } = findCase(id);
		const [A, B] = [matrix.parse(inputs['A']), matrix.parse(inputs['B'])];
		expectNumbers(computeCovarianceDistance(A, B), expected['affine_invariant'], tolerance);
		if (expected['log_volume_ratio'] !== undefined)
			expectNumbers(computeLogVolumeRatio(A, B), expected['log_volume_ratio'], tolerance);
	});

	it.each([
		'separation-2d-separated',
		'separation-2d-touching',
		'separation-2d-rotated',
		'separation-2d-concentric'
	])('%s agrees with constrained minimisation', (id) => {
		const { inputs, expected, tolerance } = findCase(id);
		const { kMin, touchingScale } = computeSeparation(
			{ center: numbers.parse(inputs['c1']), shape: matrix.parse(inputs['A1']) },
			{ center: numbers.parse(inputs['c2']), shape: matrix.parse(inputs['A2']) }
		);
		expectNumbers(kMin, expected['K_min'], tolerance);
		expectNumbers(touchingScale, expected['touching_scale'], tolerance);
	});

	it('finds the trend of a multivariate series as R anova.mlm does', () => {
		const { inputs, expected, tolerance } = findCase('drift-mlm-wilks');
		const executions = readDataset('iris_setosa', z.array(z.string()).parse(inputs['columns']));
		const trend = testTrend(executions, 0);
		expect(trend.ok).toBe(true);
		if (!trend.ok) return;
		expectNumbers(
			[trend.statistic, trend.F, trend.df1, trend.df2, trend.probability],
			['wilks', 'F', 'df1', 'df2', 'p'].map((name) => expected[name]),
			tolerance
		);
		expectNumbers(computeTrendSlopes(executions), expected['slopes'], tolerance);
	});
});

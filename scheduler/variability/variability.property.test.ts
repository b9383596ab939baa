import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { anyShape as shape } from '../../tests/support/variability/any-trials.ts';
import { multiplyMatrices, transpose } from '../linear-algebra/matrix.ts';
import { add, multiplyVector } from '../linear-algebra/vector.ts';
import { computeNormalPoints } from '../statistics/r-sequence.ts';
import { computeEllipsoid } from './compute-ellipsoid.ts';
import { computeCovarianceDistance } from './covariance-distance.ts';
import { computeSeparation } from './ellipsoid-separation.ts';
import { computeSquaredDistances } from './mahalanobis.ts';
import { computeMassInside } from './mass-inside.ts';
import { computeCovariance, computeMeanVector, computeMedian } from './moments.ts';
import { computeEffectiveCount, estimateLagOne, removeTrend } from './serial-dependence.ts';
import { trimOutliers } from './trim-outliers.ts';

const entry = fc.double({ min: -3, max: 3, noNaN: true });
/** Maps x -> B·x + c that keep areas: other units, turned axes, a new origin. */
const map = fc
	.record({ B: fc.tuple(entry, entry, entry, entry), c: fc.tuple(entry, entry) })
	.map(({ B: [a, b, c, d], c: shift }) => ({
		B: [
			[a, b],
			[c, d]
		],
		shift
	}))
	.filter(({ B: [[a = 0, b = 0] = [], [c = 0, d = 0] = []] }) => Math.abs(a * d - b * c) > 0.3);
const trials = computeNormalPoints(40, 2).map(([a = 0, b = 0]) => [2 * a + b, b - 1]);

function transform(S: number[][], B: number[][]): number[][] {
	return multiplyMatrices(multiplyMatrices(B, S), transpose(B));
}

describe('clouds in other units', () => {
	it('mean and covariance follow an affine change of the variables', () => {
		fc.assert(
			fc.property(map, ({ B, shift }) => {
				const moved = trials.map((trial) => add(multiplyVector(B, trial), shift));
				const mean = add(multiplyVector(B, computeMeanVector(trials)), shift);
				computeMeanVector(moved).forEach((value, i) =>
					expect(value).toBeCloseTo(mean[i] ?? NaN, 9)
				);
				const wanted = transform(computeCovariance(trials), B).flat();
				computeCovariance(moved)
					.flat()
					.forEach((value, i) => expect(value).toBeCloseTo(wanted[i] ?? NaN, 9));
			})
		);
	});

	it('the same trials lie inside the ellipsoid', () => {
		fc.assert(
			fc.property(map, ({ B, shift }) => {
				const distances = (executions: number[][]) => {
					const found = computeSquaredDistances({
						executions,
						center: computeMeanVector(executions),
						covariance: computeCovariance(executions)
					});
					return found.ok ? found.values : [];
				};
				const moved = trials.map((trial) => add(multiplyVector(B, trial), shift));
				const before = distances(trials);
				distances(moved).forEach((value, i) => expect(value).toBeCloseTo(before[i] ?? NaN, 6));
			})
		);
	});

	it('the volume grows by the determinant', () => {
		fc.assert(
			fc.property(map, shape, ({ B }, S) => {
				const volume = (covariance: number[][]) =>
					computeEllipsoid({ mean: [0, 0], covariance, factor: 4 }).volume;
				const [[a = 0, b = 0] = [], [c = 0, d = 0] = []] = B;
				const ratio = volume(transform(S, B)) / volume(S);
				expect(ratio).toBeCloseTo(Math.abs(a * d - b * c), 6);
			})
		);
	});

	it('the distance of two covariances stays the same, is symmetric and 0 only for equal ones', () => {
		fc.assert(
			fc.property(map, shape, shape, ({ B }, S, T) => {
				const distance = computeCovarianceDistance(S, T);
				expect(computeCovarianceDistance(transform(S, B), transform(T, B))).toBeCloseTo(
					distance,
					6
				);
				expect(computeCovarianceDistance(T, S)).toBeCloseTo(distance, 9);
				expect(computeCovarianceDistance(S, S)).toBeLessThan(1e-9);
			})
		);
	});
});

describe('computeSeparation', () => {
	it('is half the Mahalanobis distance for ellipsoids of one shape', () => {
		fc.assert(
			fc.property(shape, fc.tuple(entry, entry), (S, delta) => {
				fc.pre(Math.hypot(...delta) > 0.01);
				const { touchingScale } = computeSeparation(
					{ center: [0, 0], shape: S },
					{ center: delta, shape: S }
				);
				const distance = computeSquaredDistances({
					...{ executions: [delta], center: [0, 0], covariance: S }
				});
				const half = Math.sqrt(distance.ok ? (distance.values[0] ?? NaN) : NaN) / 2;
				expect(touchingScale).toBeCloseTo(half, 7);
			})
		);
	});
});

describe('computeMassInside', () => {
	it('is a probability that falls as the cloud moves away', () => {
		fc.assert(
			fc.property(shape, shape, entry, (covariance, region, step) => {
				const at = (distance: number) => {
					const mean = [distance * Math.abs(step), 0];
					const mass = computeMassInside({ mean, covariance, center: [0, 0], shape: region });
					return mass.ok ? mass.probability : 0;
				};
				const masses = [0, 1, 2].map(at);
				masses.forEach((mass) => expect(mass >= 0 && mass <= 1).toBe(true));
				expect((masses[0] ?? 0) + 1e-9).toBeGreaterThanOrEqual(masses[2] ?? 1);
			})
		);
	});
});

describe('robust and serial measures', () => {
	it('trimming leaves out planted strays and nothing else of a normal cloud', () => {
		const strays = trials.map((trial, i) => (i % 10 === 0 ? [50, 50] : trial));
		const cloud = trimOutliers(strays);
		const kept = cloud.ok ? cloud.kept : [];
		expect(strays.filter((_, i) => i % 10 === 0 && kept[i])).toHaveLength(0);
		expect(kept.filter(Boolean).length).toBeGreaterThanOrEqual(34);
	});

	it('says so when all trials lie on one line', () => {
		expect(trimOutliers(trials.map(([x = 0]) => [x, 1])).ok).toBe(false);
	});

	it('removes a straight line completely', () => {
		const line = Array.from({ length: 20 }, (_, i) => 3 + 0.5 * i);
		removeTrend(line).forEach((rest) => expect(Math.abs(rest)).toBeLessThan(1e-12));
	});

	it('keeps the lag-1 correlation within 0 and 0.6', () => {
		fc.assert(
			fc.property(fc.array(entry, { minLength: 12, maxLength: 60 }), (series) => {
				const r = estimateLagOne([series]);
				expect(r >= 0 && r <= 0.6).toBe(true);
			})
		);
	});

	it('correlated trials are worth fewer, never more than there are nor fewer than three', () => {
		// 60 · .7 / 1.3.
		expect(computeEffectiveCount(60, 0.3)).toBeCloseTo(32.3076923, 6);
		expect([computeEffectiveCount(60, -0.5), computeEffectiveCount(60, 1)]).toEqual([60, 3]);
		expect(computeEffectiveCount(2, 0.9)).toBe(2);
	});

	it('takes the mean of the middle two as median', () => {
		expect([computeMedian([4, 1, 3, 2]), computeMedian([5, 1, 3])]).toEqual([2.5, 3]);
	});
});

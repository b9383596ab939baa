import { describe, expect, it } from 'vitest';
import { determinantFromCholesky, computeCholesky } from '../linear-algebra/cholesky.ts';
import { multiplyMatrices, transpose } from '../linear-algebra/matrix.ts';
import { add, multiplyVector } from '../linear-algebra/vector.ts';
import { estimateMcd } from './estimate-mcd.ts';
import { findMcdSubset } from './search-mcd-subset.ts';
import { estimateOgk } from './estimate-ogk.ts';
import { flagOutliers } from './flag-outliers.ts';
import { computeSubsetSize, countSubsets, findNextSubset } from './mcd-factors.ts';
import { tiltedTrials } from '../../tests/support/variability/any-trials.ts';
import { shrinkCovariance, shrinkCovarianceOracle } from './shrink-covariance.ts';

/** Forty trials, ten of them far away on one side. */
const trials = tiltedTrials(40).map(([x = 0, y = 0], i) =>
	i % 4 === 0 ? [x + 30, y + 20] : [x, y]
);
const strays = trials.flatMap((_, i) => (i % 4 === 0 ? [i] : []));

describe('estimateMcd', () => {
	it('leaves out a quarter of strays and keeps nearly all others', () => {
		const cloud = estimateMcd(trials);
		expect(cloud.ok && strays.filter((i) => cloud.kept[i])).toEqual([]);
		expect(cloud.ok && cloud.kept.filter(Boolean).length).toBeGreaterThanOrEqual(27);
		expect(cloud.ok && Math.abs((cloud.mean[0] ?? 0) - 3)).toBeLessThan(0.5);
	});

	it('follows an affine change of the variables', () => {
		const [B, shift] = [
			[
				[2, 1],
				[-1, 3]
			],
			[5, -7]
		];
		const moved = estimateMcd(trials.map((trial) => add(multiplyVector(B, trial), shift)));
		const still = estimateMcd(trials);
		if (!moved.ok || !still.ok) throw new Error('no cloud');
		expect(moved.kept).toEqual(still.kept);
		add(multiplyVector(B, still.mean), shift).forEach((value, i) =>
			expect(moved.mean[i]).toBeCloseTo(value, 8)
		);
		multiplyMatrices(multiplyMatrices(B, still.covariance), transpose(B))
			.flat()
			.forEach((value, i) => expect(moved.covariance.flat()[i]).toBeCloseTo(value, 8));
	});

	it('gives the same for the same seed, and for another one the same subset', () => {
		const [a, b, c] = [1, 1, 2].map((seed) => estimateMcd(trials, { seed }));
		expect(a).toEqual(b);
		expect(c?.ok && c.subset.trials).toEqual(a?.ok && a.subset.trials);
	});

	it('looks at every subset when these are few', () => {
		const few = trials.slice(0, 9);
		const found = findMcdSubset(few, { subsetSize: 6 });
		expect(found?.isExact).toBe(true);
		const factor = computeCholesky(found?.covariance ?? []);
		expect(factor.ok && Math.log(determinantFromCholesky(factor.lower))).toBeCloseTo(
			found?.logDeterminant ?? NaN,
			10
		);
	});

	it('says so when half of the trials lie on one line', () => {
		const flat = trials.map(([x = 0, y = 0], i) => (i < 30 ? [x, 2 * x] : [x, y]));
		expect(estimateMcd(flat)).toEqual({ ok: false, reason: 'singular-covariance' });
	});

	it('says so when the small-sample factors do not hold for so few trials', () => {
		const few = tiltedTrials(6);
		expect(estimateMcd(few)).toEqual({ ok: false, reason: 'few-trials' });
		expect(estimateMcd(few, { isSmallSampleCorrected: false }).ok).toBe(true);
	});

	it('flags the strays and hardly any other trial', () => {
		const cloud = estimateMcd(trials);
		if (!cloud.ok) throw new Error(cloud.reason);
		const { mean: center, covariance } = cloud;
		const flags = flagOutliers({ executions: trials, center, covariance });
		expect(strays.every((i) => flags.ok && flags.isOutlier[i])).toBe(true);
		expect(flags.ok && flags.isOutlier.filter(Boolean).length).toBeLessThanOrEqual(12);
	});

	it('refuses too few trials', () => {
		expect(() => estimateMcd(trials.slice(0, 5))).toThrow(RangeError);
	});
});

describe('subsets', () => {
	it('are counted and listed in full', () => {
		let [subset, count]: [number[] | null, number] = [[0, 1, 2], 0];
		for (; subset; count++) subset = findNextSubset(subset, 6);
		expect([count, countSubsets(6, 3)]).toEqual([20, 20]);
		// h of covMcd, R robustbase: 75 trials of 3 variables.
		expect([computeSubsetSize(75, 3), computeSubsetSize(75, 3, 1)]).toEqual([39, 75]);
	});
});

describe('estimateOgk', () => {
	it('leaves out the strays too', () => {
		const cloud = estimateOgk(trials);
		expect(cloud.ok && strays.filter((i) => cloud.kept[i])).toEqual([]);
	});

	it('says so when a variable does not vary', () => {
		expect(estimateOgk(trials.map(([x = 0]) => [x, 1]))).toEqual({
			ok: false,
			reason: 'no-spread'
		});
	});
});

describe('shrunk covariances', () => {
	it('lie between the sample and a round cloud of the same trace', () => {
		for (const shrink of [shrinkCovariance, shrinkCovarianceOracle]) {
			const { shrinkage, covariance, sample } = shrink(trials.slice(0, 6));
			expect(shrinkage >= 0 && shrinkage <= 1).toBe(true);
			const trace = (A: readonly (readonly number[])[]) => (A[0]?.[0] ?? 0) + (A[1]?.[1] ?? 0);
			expect(trace(covariance)).toBeCloseTo(trace(sample), 10);
			expect(computeCholesky(covariance).ok).toBe(true);
		}
	});

	it('hold for two trials and for trials that are all the same', () => {
		expect(
			shrinkCovariance([
				[1, 2],
				[3, 5]
			])
				.covariance.flat()
				.every(Number.isFinite)
		).toBe(true);
		expect(
			shrinkCovariance([
				[1, 2],
				[1, 2]
			]).covariance
		).toEqual([
			[0, 0],
			[0, 0]
		]);
	});
});

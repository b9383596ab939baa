import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { computeCloudOverlap } from './cloud-overlap.ts';
import { computeLogEuclideanDistance } from './covariance-distance.ts';
import { computeEllipseIntersection } from './ellipse-intersection.ts';
import { anyShape } from '../../tests/support/variability/any-trials.ts';
import { computeRSequence } from '../statistics/r-sequence.ts';
import { computeSquaredDistances } from './mahalanobis.ts';
import { computeSeparation } from './ellipsoid-separation.ts';

const first = {
	mean: [1, -2, 0.5],
	covariance: [
		[4, 1, 0.5],
		[1, 3, 0.2],
		[0.5, 0.2, 2]
	]
};
const second = {
	mean: [0, 1, 0.3],
	covariance: [
		[2, 0, 0.3],
		[0, 5, -1],
		[0.3, -1, 1.5]
	]
};
const place = fc.double({ min: -6, max: 6, noNaN: true });

describe('computeCloudOverlap', () => {
	it('agrees with SciPy 1.17.1 (linalg.inv, det, sqrtm)', () => {
		const found = computeCloudOverlap(first, second);
		expect(found.ok && found.bhattacharyyaDistance).toBeCloseTo(0.4516616877411957, 12);
		expect(found.ok && found.hellinger).toBeCloseTo(0.6028519780486995, 12);
		expect(found.ok && found.divergenceFromFirst).toBeCloseTo(1.6349447805871982, 12);
		expect(found.ok && found.divergenceFromSecond).toBeCloseTo(2.3899042497826333, 12);
		expect(found.ok && found.wasserstein).toBeCloseTo(3.3222473537112034, 12);
	});

	it('is 0 for a cloud and itself, and says so when a cloud is flat', () => {
		const same = computeCloudOverlap(first, first);
		expect(same.ok && same.bhattacharyyaCoefficient).toBeCloseTo(1, 12);
		expect(same.ok && same.divergenceFromFirst).toBeCloseTo(0, 12);
		expect(same.ok && same.wasserstein).toBeLessThan(1e-6);
		const flat = {
			mean: [0, 0],
			covariance: [
				[1, 1],
				[1, 1]
			]
		};
		expect(computeCloudOverlap(flat, flat)).toEqual({ ok: false, reason: 'singular-covariance' });
	});

	it('swapping the clouds swaps the divergences and keeps the rest', () => {
		const [there, back] = [computeCloudOverlap(first, second), computeCloudOverlap(second, first)];
		expect(
			there.ok && back.ok && there.divergenceFromFirst - back.divergenceFromSecond
		).toBeCloseTo(0, 12);
		expect(there.ok && back.ok && there.wasserstein - back.wasserstein).toBeCloseTo(0, 12);
	});
});

describe('computeEllipseIntersection', () => {
	it('agrees with counting even points', () => {
		const points = computeRSequence(20_000, 2).map(([a = 0, b = 0]) => [20 * a - 10, 20 * b - 10]);
		fc.assert(
			fc.property(anyShape, anyShape, place, place, (A, B, x, y) => {
				const found = computeEllipseIntersection(
					{ center: [0, 0], shape: A },
					{ center: [x / 2, y / 2], shape: B }
				);
				const inside = (center: number[], covariance: number[][]) => {
					const distances = computeSquaredDistances({ executions: points, center, covariance });
					return distances.ok ? distances.values.map((value) => value <= 1) : [];
				};
				const [a, b] = [inside([0, 0], A), inside([x / 2, y / 2], B)];
				const counted = (a.filter((isIn, i) => isIn && b[i]).length / points.length) * 400;
				expect(Math.abs((found.ok ? found.area : NaN) - counted)).toBeLessThan(0.6);
			}),
			{ numRuns: 25 }
		);
	});

	it('is nothing exactly when the separation test says so', () => {
		fc.assert(
			fc.property(anyShape, anyShape, place, place, (A, B, x, y) => {
				const [one, two] = [
					{ center: [0, 0], shape: A },
					{ center: [x, y], shape: B }
				];
				const { touchingScale } = computeSeparation(one, two);
				fc.pre(Math.abs(touchingScale - 1) > 1e-3);
				const found = computeEllipseIntersection(one, two);
				expect(found.ok && found.area > 1e-9).toBe(touchingScale < 1);
			})
		);
	});

	it('of circles is the lens of the school book, of nested ones the inner, of equal ones both', () => {
		const circle = (x: number, radius: number) => ({
			center: [x, 0],
			shape: [
				[radius ** 2, 0],
				[0, radius ** 2]
			]
		});
		const lens = computeEllipseIntersection(circle(0, 1), circle(1, 1));
		// 2π/3 − √3/2.
		expect(lens.ok && lens.area).toBeCloseTo((2 * Math.PI) / 3 - Math.sqrt(3) / 2, 10);
		const nested = computeEllipseIntersection(circle(0, 3), circle(0.5, 1));
		expect(nested.ok && nested.area).toBeCloseTo(Math.PI, 10);
		const equal = computeEllipseIntersection(circle(0.3, 2), circle(0.3, 2));
		expect(equal.ok && equal.jaccard).toBe(1);
	});
});

describe('computeLogEuclideanDistance', () => {
	it('is the distance of the logarithms where these are known', () => {
		expect(
			computeLogEuclideanDistance(
				[
					[1, 0],
					[0, 1]
				],
				[
					[Math.E, 0],
					[0, Math.E ** 2]
				]
			)
		).toBeCloseTo(Math.sqrt(5), 12);
		expect(() =>
			computeLogEuclideanDistance(
				[
					[1, 1],
					[1, 1]
				],
				[
					[1, 0],
					[0, 1]
				]
			)
		).toThrow(RangeError);
	});
});

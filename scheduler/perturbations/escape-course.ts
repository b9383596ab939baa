import { dot, subtract, type Matrix } from '../linear-algebra/vector.ts';
import { computeWilsonInterval } from '../statistics/wilson-interval.ts';
import { projectToManifold } from '../tasks/project-to-manifold.ts';
import type { ScaledTask } from '../tasks/scaled-task.ts';
import { computeCloudOverlap } from '../variability/cloud-overlap.ts';
import { computeSeparation } from '../variability/ellipsoid-separation.ts';
import { computeCovariance, computeMeanVector, computeMedian } from '../variability/moments.ts';
import { createRegionTest } from './escape-statistics.ts';
import type { Region } from './region-settings.ts';
import { findSolutionWays, type WayPoint } from './solution-ways.ts';

interface ShareInterval {
	readonly share: number;
	/** 95 % Wilson interval. */
	readonly low: number;
	readonly high: number;
}

/** How a person moved under a region over a whole course of trials: outcomes for the analysis. */
export interface EscapeCourse {
	readonly trialCount: number;
	readonly outside: ShareInterval;
	/** Hits outside the region. */
	readonly solved: ShareInterval;
	/** (solved − stay) / (1 − stay): 0 stayed, 1 all escaped. */
	readonly relative: number;
	/** Between the clouds of the first and the last third. Above 1 the one-SD ellipsoids are apart. */
	readonly touchingScale: number;
	/** Bhattacharyya coefficient: 1 the same cloud, 0 nothing in common. */
	readonly overlap: number;
	/** Median way of the last third along the solutions from the region, scaled; null: no way is clear. */
	readonly travel: number | null;
	/** The side of the way out; 0: none. */
	readonly side: -1 | 0 | 1;
	/** Share inside the region once it was removed; null: no such trials. */
	readonly reentry: ShareInterval | null;
}

export type EscapeCourseResult =
	({ ok: true } & EscapeCourse) | { ok: false; reason: 'too-few-trials' | 'singular-cloud' };

/**
 * Escape measures of a course under a penalized region.
 *
 * Shapes:  executions (trials × d), in order, scaled; afterRemoval the same, may be empty.
 * Units:   scaled; shares.
 * Method:  outside and solved shares with Wilson intervals; touching scale and Bhattacharyya coefficient
 *          of the clouds of the first and last third; travel = median place of the last third's trials on
 *          the solutions, each taken to the nearest traced point, from the solution nearest the center.
 * Source:  method sheet D2 (Escape measures), B6.
 * Accuracy: escape-course.test.ts, planted courses.
 */
export function describeEscapeCourse(options: {
	task: ScaledTask;
	region: Region;
	executions: Matrix;
	afterRemoval?: Matrix;
	/** How far along the solutions travel is looked for, scaled. */
	length?: number;
}): EscapeCourseResult {
	const { task, region, executions, afterRemoval = [], length = 10 } = options;
	const third = Math.floor(executions.length / 3);
	if (third < task.variableCount + 2) return { ok: false, reason: 'too-few-trials' };
	const [first, last] = [executions.slice(0, third), executions.slice(-third)].map(describeCloud);
	const overlap = first && last ? computeCloudOverlap(first, last) : null;
	if (!first || !last || !overlap?.ok) return { ok: false, reason: 'singular-cloud' };
	const isInside = createRegionTest(region);
	const outside = executions.filter((z) => !isInside(z));
	const solved = outside.filter((z) => Math.abs(task.evaluate(z)) <= task.tolerance);
	const share = solved.length / executions.length;
	const travel = measureTravel({ task, region, executions: executions.slice(-third), length });
	return {
		...{ ok: true, trialCount: executions.length },
		outside: describeShare(outside.length, executions.length),
		solved: describeShare(solved.length, executions.length),
		relative: (share - region.stay) / (1 - region.stay),
		touchingScale: computeSeparation(
			{ center: first.mean, shape: first.covariance },
			{ center: last.mean, shape: last.covariance }
		).touchingScale,
		overlap: overlap.bhattacharyyaCoefficient,
		...{ travel, side: travel === null || travel === 0 ? 0 : travel > 0 ? 1 : -1 },
		reentry:
			afterRemoval.length > 0
				? describeShare(afterRemoval.filter(isInside).length, afterRemoval.length)
				: null
	};
}

function describeCloud(executions: Matrix) {
	return { mean: computeMeanVector(executions), covariance: computeCovariance(executions) };
}

function describeShare(successCount: number, trialCount: number): ShareInterval {
	const { lower, upper } = computeWilsonInterval({ successCount, trialCount, level: 0.95 });
	return { share: successCount / trialCount, low: lower, high: upper };
}

function measureTravel(options: {
	task: ScaledTask;
	region: Region;
	executions: Matrix;
	length: number;
}): number | null {
	const { task, region, length } = options;
	const start = projectToManifold({ task, mean: region.center, covariance: region.shape });
	if (!start.ok) return null;
	const found = findSolutionWays({
		...{ task, start: start.point, covariance: region.shape },
		...{ length, lengthSd: length, step: 0.02 }
	});
	if (!found.ok) return null;
	const points = [...found.ways.plus, ...found.ways.minus.slice(1)];
	return computeMedian(options.executions.map((z) => nearestPlace(points, z)));
}

function nearestPlace(points: readonly WayPoint[], z: readonly number[]): number {
	let best = { s: 0, distance: Number.POSITIVE_INFINITY };
	for (const point of points) {
		const way = subtract(point.z, z);
		const distance = dot(way, way);
		if (distance < best.distance) best = { s: point.s, distance };
	}
	return best.s;
}

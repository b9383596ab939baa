import { add, scale, type Vector } from '$scheduler/linear-algebra/vector';
import { createTask } from '$scheduler/tasks/create-task';
import { traceBranches } from '$scheduler/tasks/find-solutions';
import { createScaledTask, type ScaledTask } from '$scheduler/tasks/scaled-task';
import type { TaskRecord } from '$scheduler/tasks/task-record';
import { returnToManifold } from '$scheduler/tasks/trace-manifold';
import { traceSurface } from '$scheduler/tasks/trace-surface';
import type { SpacePicture, SpacePoint, SpaceRequest } from './cloud-request';
import { createShareReader } from './forgiveness';

/** Tiles that the longest range is cut into. */
const TILES = 18;
const TILES_MAX = 1000;
/** Steps along a curve, in scales. */
const CURVE_STEP = 0.25;
const CURVE_LENGTH = 120;

/**
 * The perfect trials of a task of three variables as a picture in space: a surface of small tiles, or curves.
 *
 * Units:   task units.
 * Method:  traceSurface in coordinates in which every range has the same length, so that tiles are even in
 *          the picture; curves by traceBranches. Each place with the share of the cloud it forgives.
 */
export function computeSpace({ record, center, trials }: SpaceRequest): SpacePicture {
	const task = createTask(record);
	const free = task.variableCount - task.resultCount;
	if (free === 1) {
		const curves = traceWholeCurves(record).map((curve) =>
			curve.map((at): SpacePoint => ({ at, tile: [], share: Number.NaN }))
		);
		return {
			points: [],
			curves: curves.map((curve) => withShares(record, trials, curve)),
			isComplete: true
		};
	}
	if (free !== 2) return { points: [], curves: [], isComplete: true };
	// Ranges as scales: a picture's own metric.
	const even = createScaledTask(
		createTask({
			...record,
			variables: record.variables.map((variable) => ({
				...variable,
				scale: (variable.max - variable.min) / TILES
			}))
		})
	);
	const start = returnToManifold(even, even.toScaled(center));
	if (!start || !even.isWithinRanges(start)) return { points: [], curves: [], isComplete: false };
	const reach = 2 * TILES * Math.sqrt(record.variables.length);
	const trace = traceSurface(even, start, { reach, spacing: 1, countMax: TILES_MAX });
	const points = trace.points.map(({ z, free: directions }): SpacePoint => ({
		at: even.toUnits(z),
		tile: listCorners(even, z, directions),
		share: Number.NaN
	}));
	return { points: withShares(record, trials, points), curves: [], isComplete: trace.isComplete };
}

function withShares(
	record: TaskRecord,
	trials: SpaceRequest['trials'],
	points: readonly SpacePoint[]
): SpacePoint[] {
	const shareAt = createShareReader(createTask(record), trials);
	return points.map((point) => ({ ...point, share: shareAt(point.at) }));
}

function listCorners(task: ScaledTask, z: Vector, [first = [], second = []]: readonly Vector[]) {
	const half = 0.52;
	const corners: [number, number][] = [
		[-half, -half],
		[half, -half],
		[half, half],
		[-half, half]
	];
	return corners.map(([u, v]) => task.toUnits(add(z, add(scale(first, u), scale(second, v)))));
}

/** Every curve of perfect trials inside the ranges, in task units. */
export function traceWholeCurves(record: TaskRecord): number[][][] {
	const task = createTask(record);
	const scaled = createScaledTask(task);
	const options = { length: CURVE_LENGTH, step: CURVE_STEP };
	return traceBranches(task, scaled, options).map(({ plus, minus }) =>
		[...[...minus].reverse(), ...plus.slice(1)].map(({ z }) => scaled.toUnits(z))
	);
}

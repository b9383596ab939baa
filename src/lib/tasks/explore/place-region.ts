import { multiplyMatrices, transpose } from '$scheduler/linear-algebra/matrix';
import { splitRowSpace } from '$scheduler/linear-algebra/row-space';
import { entry } from '$scheduler/linear-algebra/vector';
import { createScaledTask } from '$scheduler/tasks/scaled-task';
import type { Task } from '$scheduler/tasks/task';
import type { RegionWish } from './cloud-request';
import type { Region } from './region-facts';

/**
 * A region with its long way along the solutions at its center, in all variables and in the plane shown.
 * Null where the task has no slope there.
 */
export function placeRegion(
	task: Task,
	plane: Task,
	axes: readonly [number, number],
	{ center, alongSd, acrossSd }: RegionWish
): { region: Region; planeRegion: Region } | null {
	const shape = shapeAt(task, center, { alongSd, acrossSd });
	const planeCenter = axes.map((axis) => entry(center, axis));
	const planeShape = shapeAt(plane, planeCenter, { alongSd, acrossSd });
	if (!shape || !planeShape) return null;
	return {
		region: { center, shape },
		planeRegion: { center: planeCenter, shape: planeShape }
	};
}

/** along²·P + across²·(I − P) in scaled coordinates, P the projection on the free directions. */
function shapeAt(
	task: Task,
	center: readonly number[],
	{ alongSd, acrossSd }: { alongSd: number; acrossSd: number }
): number[][] | null {
	const scaled = createScaledTask(task);
	const jacobian = scaled.jacobian(scaled.toScaled(center));
	if (!jacobian.every((row) => row.every(Number.isFinite))) return null;
	const { basis } = splitRowSpace(jacobian);
	if (basis.length === 0) return null;
	const across = multiplyMatrices(transpose(basis), basis);
	const scales = task.variables.map(({ scale }) => scale);
	return across.map((row, i) =>
		row.map((value, j) => {
			const free = (i === j ? 1 : 0) - value;
			return (alongSd ** 2 * free + acrossSd ** 2 * value) * entry(scales, i) * entry(scales, j);
		})
	);
}

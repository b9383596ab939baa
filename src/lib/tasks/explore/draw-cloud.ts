import { computeNullBasis } from '$scheduler/linear-algebra/null-basis';
import { splitRowSpace } from '$scheduler/linear-algebra/row-space';
import { add, scale } from '$scheduler/linear-algebra/vector';
import { drawNormal } from '$scheduler/random/random-stream';
import { createSeededStream } from '$scheduler/random/seeded-stream';
import { createScaledTask } from '$scheduler/tasks/scaled-task';
import type { Task } from '$scheduler/tasks/task';

/** An invented practised person: how far their trials scatter along and across the solutions. */
export interface CloudRequest {
	/** Middle of the trials, in task units. */
	readonly center: readonly number[];
	readonly trials: number;
	/** SD along the solutions and across them, in scales of the variables. */
	readonly alongSd: number;
	readonly acrossSd: number;
	readonly seed: number;
}

/**
 * Trials of an invented person around a place.
 *
 * Shapes:  trials × d, in task units, inside the ranges.
 * Method:  normal deviations in scaled coordinates, of one SD along the free directions of the task at the
 *          center and of another across; where the task has no slope, of the same in all directions. Values
 *          beyond a range are put at its end. The same seed gives the same trials.
 */
export function drawCloud(task: Task, request: CloudRequest): number[][] {
	const scaled = createScaledTask(task);
	const { alongSd, acrossSd, trials, seed } = request;
	const middle = scaled.toScaled(request.center);
	const { along, across } = listDirections(scaled.jacobian(middle), task.variableCount);
	const stream = createSeededStream(seed);
	return Array.from({ length: trials }, () => {
		const moved = [
			...along.map((direction) => scale(direction, alongSd * drawNormal(stream))),
			...across.map((direction) => scale(direction, acrossSd * drawNormal(stream)))
		].reduce((sum, step) => add(sum, step), middle);
		return scaled.toUnits(moved).map((value, i) => {
			const { min = value, max = value } = task.variables[i] ?? {};
			return Math.min(max, Math.max(min, value));
		});
	});
}

/** Directions that leave the results alone and those that change them, each of length 1. */
function listDirections(jacobian: number[][], count: number) {
	const isUsable = jacobian.every((row) => row.every(Number.isFinite));
	const { basis } = isUsable ? splitRowSpace(jacobian) : { basis: [] };
	if (basis.length === 0) {
		const all = Array.from({ length: count }, (_, i) =>
			Array.from({ length: count }, (_unused, j) => (i === j ? 1 : 0))
		);
		return { along: [], across: all };
	}
	return { along: (basis.length < count && computeNullBasis(basis)) || [], across: basis };
}

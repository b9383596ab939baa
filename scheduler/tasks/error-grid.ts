import { computeLinearSteps } from './linear-steps.ts';
import type { Task } from './task.ts';

/** A rectangle in task units: first variable from left to right, second from bottom to top. */
export interface TaskWindow {
	readonly x: readonly [number, number];
	readonly y: readonly [number, number];
}

export interface ErrorGrid {
	/** nx values of the first variable, ny of the second, both ascending. */
	readonly x: readonly number[];
	readonly y: readonly number[];
	/** values[j][i]: signed result at (x[i], y[j]); null where the task has no result. */
	readonly values: readonly (readonly (number | null)[])[];
}

/**
 * The result over a window, for an error map.
 *
 * Shapes:  nx × ny, both >= 2; rows run along y.
 * Units:   those of the task.
 * @throws {RangeError} a task that has not two variables, or a grid of fewer than 2 × 2 points
 */
export function evaluateErrorGrid(
	task: Task,
	window: TaskWindow,
	nx: number,
	ny: number
): ErrorGrid {
	if (task.variableCount !== 2)
		throw new RangeError('an error map requires a task of two variables; use cutTask first');
	const x = computeLinearSteps(window.x, nx);
	const y = computeLinearSteps(window.y, ny);
	return { x, y, values: y.map((b) => x.map((a) => finiteOrNull(task.evaluate([a, b])))) };
}

function finiteOrNull(value: number): number | null {
	return Number.isFinite(value) ? value : null;
}

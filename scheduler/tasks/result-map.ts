import { entry } from '../linear-algebra/vector.ts';
import { computeLinearSteps } from './linear-steps.ts';
import type { TaskWindow } from './error-grid.ts';
import type { Task } from './task.ts';

/** The results over a window, point by point, for pictures that are drawn many times a second. */
export interface ResultMap {
	readonly window: TaskWindow;
	/** Points along x and y, the ends of the window included. */
	readonly nx: number;
	readonly ny: number;
	/** One list a result, nx × ny, rows along x from the bottom; NaN where there is none. */
	readonly results: readonly Float64Array[];
	/** 1 where an execution has no valid outcome, for instance a ball on the post. */
	readonly invalid: Uint8Array;
}

/**
 * Results of a task of two variables on a grid of points.
 *
 * Shapes:  nx × ny, both at least 2.
 * Units:   those of the task. Results stay smooth across executions that are invalid but have a result.
 * Source:  method sheet A7; agrees with the task's own evaluation (result-map.test.ts).
 * @throws {RangeError} a task that has not two variables
 */
export function evaluateResultMap(
	task: Task,
	window: TaskWindow,
	nx: number,
	ny: number
): ResultMap {
	const { map, fillRow } = beginResultMap(task, window, nx, ny);
	for (let j = 0; j < ny; j++) fillRow(j);
	return map;
}

/**
 * The same map, filled row by row by the caller, who may stop in between when nobody waits for it any more.
 * @throws {RangeError} a task that has not two variables
 */
export function beginResultMap(
	task: Task,
	window: TaskWindow,
	nx: number,
	ny: number
): { map: ResultMap; fillRow: (j: number) => void } {
	if (task.variableCount !== 2)
		throw new RangeError('a result map requires a task of two variables; use cutTask first');
	const xs = computeLinearSteps(window.x, nx);
	const ys = computeLinearSteps(window.y, ny);
	const results = Array.from({ length: task.resultCount }, () => new Float64Array(nx * ny));
	const invalid = new Uint8Array(nx * ny);
	const point = [0, 0];
	const fillRow = (j: number) => {
		point[1] = entry(ys, j);
		xs.forEach((x, i) => {
			point[0] = x;
			const place = j * nx + i;
			const { values, isValid } = assess(task, point);
			results.forEach((list, k) => (list[place] = values[k] ?? Number.NaN));
			invalid[place] = isValid ? 0 : 1;
		});
	};
	return { map: { window, nx, ny, results, invalid }, fillRow };
}

function assess(task: Task, point: readonly number[]): { values: number[]; isValid: boolean } {
	if (task.assess) {
		const { result, invalid } = task.assess(point);
		return { values: [result], isValid: invalid === null };
	}
	const values = task.results(point);
	return { values, isValid: values.every(Number.isFinite) };
}

/** The same map for a task whose result is everywhere less by an amount, as that of a farther target. */
export function shiftResultMap(map: ResultMap, amount: number): ResultMap {
	return { ...map, results: map.results.map((list) => list.map((value) => value - amount)) };
}

/** Size of the miss at a point of the grid: the distance of all results from 0. */
export function missAt({ results }: ResultMap, place: number): number {
	const [first] = results;
	if (results.length === 1) return Math.abs(first?.[place] ?? Number.NaN);
	return Math.hypot(...results.map((list) => list[place] ?? Number.NaN));
}

/** Share of the window whose executions have no valid outcome. */
export function computeInvalidShare({ invalid }: ResultMap): number {
	return invalid.reduce((sum, flag) => sum + flag, 0) / invalid.length;
}

import { evaluateErrorGrid, type ErrorGrid, type TaskWindow } from './error-grid.ts';
import { joinSegments, type Crossing, type PlanePoint } from './join-segments.ts';
import type { Task } from './task.ts';

export type { PlanePoint };

const HALVINGS = 40;

/**
 * The solution manifold of a two-variable task inside a window, as polylines for pictures.
 *
 * Shapes:  one list of points [x, y] a branch; a closed branch ends where it began.
 * Units:   those of the task.
 * Method:  marching squares on a cells × cells grid; each crossing is found on its edge by bisection,
 *          so every point solves the task. Saddles are joined by the sign at the cell's center.
 *          Branches smaller than a cell may be missed.
 * Source:  method sheet A7.
 * @param level result whose set is wanted: 0, or ± the tolerance for the band of hits
 * @throws {RangeError} a task that has not two variables
 */
export function traceZeroSet(
	task: Task,
	window: TaskWindow,
	{ cells = 96, level = 0 }: { cells?: number; level?: number } = {}
): PlanePoint[][] {
	const shifted: Task = { ...task, evaluate: (x) => task.evaluate(x) - level };
	const grid = evaluateErrorGrid(shifted, window, cells + 1, cells + 1);
	const segments: [Crossing, Crossing][] = [];
	for (let j = 0; j < cells; j++)
		for (let i = 0; i < cells; i++) segments.push(...cutCell(shifted, grid, i, j));
	return joinSegments(segments);
}

/** Segments of the zero set inside one cell. */
function cutCell(task: Task, grid: ErrorGrid, i: number, j: number): [Crossing, Crossing][] {
	const corners = [
		[i, j],
		[i + 1, j],
		[i + 1, j + 1],
		[i, j + 1]
	].map(([a = 0, b = 0]) => ({ i: a, j: b, value: grid.values[b]?.[a] ?? null }));
	const crossings = corners.flatMap((from, side) => {
		const to = corners[(side + 1) % 4];
		return to ? findCrossing(task, grid, from, to) : [];
	});
	const [a, b, c, d] = crossings;
	if (!a || !b) return [];
	if (!c || !d) return [[a, b]];
	return isCenterLikeFirst(task, grid, i, j)
		? [
				[a, b],
				[c, d]
			]
		: [
				[d, a],
				[b, c]
			];
}

interface Corner {
	readonly i: number;
	readonly j: number;
	readonly value: number | null;
}

function findCrossing(task: Task, grid: ErrorGrid, from: Corner, to: Corner): Crossing[] {
	if (from.value === null || to.value === null) return [];
	if (from.value < 0 === to.value < 0) return [];
	const key = [`${from.i},${from.j}`, `${to.i},${to.j}`].sort().join(' ');
	const point = bisect(task, placeOf(grid, from), placeOf(grid, to), from.value < 0);
	return point ? [{ key, point }] : [];
}

function placeOf(grid: ErrorGrid, { i, j }: Corner): PlanePoint {
	return [grid.x[i] ?? 0, grid.y[j] ?? 0];
}

/** Null when the sign changes by a jump, as at a pole, instead of through zero. */
function bisect(task: Task, from: PlanePoint, to: PlanePoint, startsBelow: boolean) {
	let [low, high] = [from, to];
	for (let k = 0; k < HALVINGS; k++) {
		const middle: PlanePoint = [(low[0] + high[0]) / 2, (low[1] + high[1]) / 2];
		if (task.evaluate(middle) < 0 === startsBelow) low = middle;
		else high = middle;
	}
	const rest = Math.abs(task.evaluate(low));
	const before = Math.max(Math.abs(task.evaluate(from)), Math.abs(task.evaluate(to)));
	return rest <= 1e-3 * before + 1e-9 * task.tolerance ? low : null;
}

/** Four crossings: whether the cell’s center has the sign of its corner (i, j). */
function isCenterLikeFirst(task: Task, grid: ErrorGrid, i: number, j: number): boolean {
	const x = ((grid.x[i] ?? 0) + (grid.x[i + 1] ?? 0)) / 2;
	const y = ((grid.y[j] ?? 0) + (grid.y[j + 1] ?? 0)) / 2;
	return task.evaluate([x, y]) < 0 !== (grid.values[j]?.[i + 1] ?? 0) < 0;
}

import { solveSquare } from '$scheduler/linear-algebra/solve-square';
import { norm, subtract } from '$scheduler/linear-algebra/vector';
import { missAt, type ResultMap } from '$scheduler/tasks/result-map';
import type { Task } from '$scheduler/tasks/task';
import type { Point } from '$lib/charts/cloud-data';

const ROUNDS_MAX = 20;

/**
 * Single solutions of a plane on which as many results as variables have to be 0.
 *
 * Method:  Newton from every point of the map that misses by less than its eight neighbours; those that end
 *          inside the window with a miss below a millionth of the tolerance, each once.
 */
export function findPlaneSolutions(task: Task, map: ResultMap): Point[] {
	if (task.resultCount !== 2) return [];
	const { window, nx, ny } = map;
	const span = [window.x[1] - window.x[0], window.y[1] - window.y[0]] as const;
	const found: Point[] = [];
	for (let j = 1; j + 1 < ny; j++)
		for (let i = 1; i + 1 < nx; i++) {
			if (!isLowest(map, i, j)) continue;
			const start: Point = [
				window.x[0] + (i / (nx - 1)) * span[0],
				window.y[0] + (j / (ny - 1)) * span[1]
			];
			const point = polish(task, start);
			if (!point || !isInside(point, map)) continue;
			const isNew = found.every(
				([x, y]) => Math.hypot((x - point[0]) / span[0], (y - point[1]) / span[1]) > 1e-3
			);
			if (isNew) found.push(point);
		}
	return found;
}

function isLowest(map: ResultMap, i: number, j: number): boolean {
	const here = missAt(map, j * map.nx + i);
	for (const dj of [-1, 0, 1])
		for (const di of [-1, 0, 1]) if (missAt(map, (j + dj) * map.nx + i + di) < here) return false;
	return Number.isFinite(here);
}

function polish(task: Task, start: Point): Point | null {
	let point: number[] = [...start];
	for (let round = 0; round < ROUNDS_MAX; round++) {
		const step = solveSquare(task.jacobian(point), task.results(point));
		if (!step?.every(Number.isFinite)) return null;
		point = subtract(point, step);
	}
	const [x, y] = point;
	const isSolved = norm(task.results(point)) <= 1e-6 * task.tolerance;
	return isSolved && x !== undefined && y !== undefined ? [x, y] : null;
}

function isInside([x, y]: Point, { window }: ResultMap): boolean {
	return window.x[0] <= x && x <= window.x[1] && window.y[0] <= y && y <= window.y[1];
}

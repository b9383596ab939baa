import { NeighbourGrid } from './neighbour-grid.ts';
import type { ScaledTask } from './scaled-task.ts';
import type { Task } from './task.ts';
import { returnToManifold, traceManifold, type ManifoldTrace } from './trace-manifold.ts';

/** Steps of the starting grid along each variable, by the count of variables. */
const GRID_STEPS: readonly number[] = [0, 64, 24, 10, 6, 4];

/**
 * Valid solutions within the ranges, found by Newton from every point of a grid over them; two are never
 * nearer than `apart` (scaled). Parts of the manifold smaller than the grid may be missed.
 *
 * Source:  method sheet A7.
 */
export function findSolutions(task: Task, scaled: ScaledTask, apart: number): number[][] {
	const found = new NeighbourGrid(apart);
	for (const x of listGrid(task)) {
		const z = returnToManifold(scaled, scaled.toScaled(x));
		if (!z || !scaled.isWithinRanges(z) || scaled.findInvalid(z)) continue;
		if (found.findNear(z, apart).length === 0) found.add(z);
	}
	return found.points.map((point) => [...point]);
}

/**
 * Every branch of a manifold with one free direction inside the ranges, each once.
 *
 * Units:   scaled.
 * Method:  traced from each solution that no branch before has passed within two steps.
 * Source:  method sheet A7.
 */
export function traceBranches(
	task: Task,
	scaled: ScaledTask,
	{ length, step }: { length: number; step: number }
): ManifoldTrace[] {
	const passed = new NeighbourGrid(2 * step);
	const traces: ManifoldTrace[] = [];
	for (const start of findSolutions(task, scaled, 2 * step)) {
		if (passed.findNear(start, 2 * step).length > 0) continue;
		const trace = traceManifold(scaled, start, { length, step, closes: true });
		for (const { z } of [...trace.plus, ...trace.minus]) passed.add(z);
		traces.push(trace);
	}
	return traces;
}

function listGrid({ variables }: Task): number[][] {
	const steps = GRID_STEPS[variables.length] ?? 3;
	return variables.reduce<number[][]>(
		(points, { min, max }) =>
			points.flatMap((point) =>
				Array.from({ length: steps + 1 }, (_, i) => [...point, min + ((max - min) * i) / steps])
			),
		[[]]
	);
}

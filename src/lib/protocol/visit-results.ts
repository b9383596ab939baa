import { createTask } from '$scheduler/tasks/create-task';
import type { TaskRecord } from '$scheduler/tasks/task-record';

/** Steps of the grid along each variable, by the count of variables. */
const stepsByCount: readonly number[] = [0, 60, 40, 14, 8, 5];

/**
 * Shows the signed result at each place of a grid over the ranges until `isEnough` says so; executions
 * without a result are left out. False when there are too many variables to look, or several results.
 */
export function visitResults(record: TaskRecord, isEnough: (result: number) => boolean): boolean {
	const steps = stepsByCount[record.variables.length];
	const task = createTask(record);
	if (steps === undefined || task.resultCount > 1) return false;
	const point = record.variables.map(({ min }) => min);
	const count = (steps + 1) ** record.variables.length;
	for (let cell = 0; cell < count; cell++) {
		record.variables.forEach(({ min, max }, i) => {
			const step = Math.floor(cell / (steps + 1) ** i) % (steps + 1);
			point[i] = min + ((max - min) * step) / steps;
		});
		const result = task.evaluate(point);
		if (Number.isFinite(result) && isEnough(result)) return true;
	}
	return true;
}

/** Lowest and highest result on the grid; null when it cannot be looked at. */
export function findResultRange(record: TaskRecord): { low: number; high: number } | null {
	let [low, high] = [Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY];
	const isLooked = visitResults(record, (result) => {
		low = Math.min(low, result);
		high = Math.max(high, result);
		return false;
	});
	return isLooked && low <= high ? { low, high } : null;
}

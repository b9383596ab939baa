import { createTask } from '$scheduler/tasks/create-task';
import type { TaskRecord } from '$scheduler/tasks/task-record';

/** Steps of the grid along each variable, by the count of variables. */
const stepsByCount: readonly number[] = [0, 60, 40, 14, 8, 5];

/**
 * Whether the result takes both signs (or 0) on a grid over the ranges; null when there are too many
 * variables to look.
 */
export function hasZeroInside(record: TaskRecord): boolean | null {
	const steps = stepsByCount[record.variables.length];
	if (steps === undefined) return null;
	const task = createTask(record);
	let [hasLow, hasHigh] = [false, false];
	const point = record.variables.map(({ min }) => min);
	const count = (steps + 1) ** record.variables.length;
	for (let cell = 0; cell < count && !(hasLow && hasHigh); cell++) {
		record.variables.forEach(({ min, max }, i) => {
			const step = Math.floor(cell / (steps + 1) ** i) % (steps + 1);
			point[i] = min + ((max - min) * step) / steps;
		});
		const result = task.evaluate(point);
		hasLow ||= result <= 0;
		hasHigh ||= result >= 0;
	}
	return hasLow && hasHigh;
}

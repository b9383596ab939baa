import { createTask } from '$scheduler/tasks/create-task';
import { findSolutions } from '$scheduler/tasks/find-solutions';
import { createScaledTask } from '$scheduler/tasks/scaled-task';
import type { TaskRecord } from '$scheduler/tasks/task-record';
import { visitResults } from './visit-results';

/** Scaled distance below which two solutions count as one: a coarse look is enough here. */
const APART = 1;
const VARIABLES_MAX = 5;

/**
 * Whether some execution inside the ranges is perfect: the result takes both signs (or 0), or, for
 * several results, the engine finds a place where all are 0. Null when there are too many variables to
 * look.
 */
export function hasZeroInside(record: TaskRecord): boolean | null {
	if (record.variables.length > VARIABLES_MAX) return null;
	const task = createTask(record);
	if (task.resultCount > 1) return findSolutions(task, createScaledTask(task), APART).length > 0;
	let [hasLow, hasHigh] = [false, false];
	visitResults(record, (result) => {
		hasLow ||= result <= 0;
		hasHigh ||= result >= 0;
		return hasLow && hasHigh;
	});
	return hasLow && hasHigh;
}

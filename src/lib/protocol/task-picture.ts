import { createTask } from '$scheduler/tasks/create-task';
import { cutTask } from '$scheduler/tasks/cut-task';
import { evaluateErrorGrid } from '$scheduler/tasks/error-grid';
import type { TaskRecord } from '$scheduler/tasks/task-record';
import { traceZeroSet } from '$scheduler/tasks/trace-zero-set';
import type { Axis, CloudData } from '$lib/charts/cloud-data';

const gridSteps = 72;

/**
 * The error map of a task over the ranges of its first two variables, the others held at their
 * origin, with the line of perfect trials. Null for a task of one variable.
 */
export function pictureTask(record: TaskRecord): CloudData | null {
	const [first, second] = record.variables;
	if (!first || !second) return null;
	const whole = createTask(record);
	const task =
		record.variables.length === 2
			? whole
			: cutTask(
					whole,
					[0, 1],
					record.variables.map(({ origin }) => origin)
				);
	const window = { x: [first.min, first.max], y: [second.min, second.max] } as const;
	return {
		x: axisOf(first),
		y: axisOf(second),
		grid: evaluateErrorGrid(task, window, gridSteps, gridSteps),
		// Several results give a distance, which has no change of sign to be followed.
		zeroSet: task.resultCount === 1 ? traceZeroSet(task, window) : [],
		tolerance: record.tolerance,
		result: { unit: record.resultUnit, factor: 1 },
		trials: [],
		ellipses: [
			{
				kind: 'expected',
				center: [first.origin, second.origin],
				shape: [
					[first.scale ** 2, 0],
					[0, second.scale ** 2]
				],
				label: 'one SD by your scales'
			}
		],
		zeroLabel: task.resultCount === 1 ? 'error 0' : ''
	};
}

function axisOf({ name, unit, min, max }: TaskRecord['variables'][number]): Axis {
	return { label: name.replaceAll('_', ' '), unit, domain: [min, max] };
}

import { entry } from '$scheduler/linear-algebra/vector';
import { niceStep } from '$lib/charts/error-bands';
import type { TaskRecord, TaskVariable } from '$scheduler/tasks/task-record';

/** Part of a variable's scale that one press of a key moves. */
const STEP_SHARE = 0.1;
/** Shift makes steps larger by this. */
export const FAR_FACTOR = 10;

/** A round step of a variable, about a tenth of its scale. */
export function stepOf({ scale }: Pick<TaskVariable, 'scale'>): number {
	return niceStep(STEP_SHARE * scale);
}

/** The probe one step on along a variable, inside its range and on whole steps. */
export function moveProbe(
	record: TaskRecord,
	point: readonly number[],
	axis: number,
	steps: number
): number[] {
	const variable = record.variables[axis];
	if (!variable) return [...point];
	const step = stepOf(variable);
	const to = Math.round(entry(point, axis) / step + steps) * step;
	return point.map((value, i) => (i === axis ? clampTo(variable, to) : value));
}

/** The probe at a typed or pointed value, inside the range. */
export function clampTo({ min, max }: Pick<TaskVariable, 'min' | 'max'>, value: number): number {
	// Sums of steps such as 0.1 leave rounding behind.
	return Number(Math.min(max, Math.max(min, value)).toPrecision(12));
}

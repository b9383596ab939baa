import type { ResultWords } from '$lib/charts/cloud-data';
import { formatFixed } from '$lib/charts/format-ticks';
import type { TaskRecord } from '$scheduler/tasks/task-record';

/** How results of a task are written: small lengths in cm, everything else in its own unit. */
export function chooseResultWords(
	record: Pick<TaskRecord, 'resultUnit' | 'tolerance'>
): ResultWords & { digits: number } {
	const { resultUnit, tolerance } = record;
	const factor = resultUnit === 'm' && tolerance < 1 ? 100 : 1;
	const unit = factor === 100 ? 'cm' : resultUnit;
	// One digit more than the tolerance needs.
	const digits = Math.min(6, Math.max(0, 1 - Math.floor(Math.log10(tolerance * factor))));
	return { unit, factor, digits: digits > 1 && factor === 100 ? digits - 1 : digits };
}

/** A result with its unit: "5.6 cm". */
export function writeResult(value: number, record: Pick<TaskRecord, 'resultUnit' | 'tolerance'>) {
	const { unit, factor, digits } = chooseResultWords(record);
	return `${formatFixed(value * factor, digits)} ${unit}`.trim();
}

/** A change with its sign: "+1.2 cm". */
export function writeChange(value: number, record: Pick<TaskRecord, 'resultUnit' | 'tolerance'>) {
	const text = writeResult(value, record);
	return value < 0 || text.startsWith('−') ? text : `+${text}`;
}

/** Digits that show a step of this size. */
export function digitsFor(step: number): number {
	return Math.min(8, Math.max(0, -Math.floor(Math.log10(step) + 1e-9)));
}

/** The unit as it stands behind a number: "°" close by, others with a space. */
export function withUnit(text: string, unit: string): string {
	if (unit === 'deg') return `${text}°`;
	return unit === '' ? text : `${text} ${unit}`;
}

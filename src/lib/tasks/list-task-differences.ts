import type { TaskRecord } from '$scheduler/tasks/task-record';
import { writeTaskDraft, type VariableDraft } from './task-draft';
import { taskModels } from './task-models';

/** One thing that differs between two tasks, in words and numbers. */
export interface TaskDifference {
	readonly what: string;
	readonly before: string;
	readonly after: string;
}

const none = 'none';

/** What changed from one task to another, in the order of the form; empty for equal tasks. */
export function listTaskDifferences(before: TaskRecord, after: TaskRecord): TaskDifference[] {
	if (before.type !== after.type)
		return [
			{ what: 'Model', before: taskModels[before.type].label, after: taskModels[after.type].label }
		];
	const [old, now] = [writeTaskDraft(before), writeTaskDraft(after)];
	const { numbers, choices } = taskModels[after.type];
	const lines: (TaskDifference | null)[] = [
		differ('Formula', old.formula, now.formula),
		...numbers.map(({ key, label, unit, emptyMeans }) => {
			const write = (value: number | null | undefined) =>
				value === null || value === undefined ? (emptyMeans ?? none) : withUnit(value, unit);
			return differ(label, write(old.numbers[key]), write(now.numbers[key]));
		}),
		...choices.map(({ key, label, options }) => {
			const write = (value: string | undefined) =>
				options.find((option) => option.value === value)?.label ?? none;
			return differ(label, write(old.choices[key]), write(now.choices[key]));
		}),
		differ('Unit of the result', old.resultUnit || none, now.resultUnit || none),
		differ(
			'Tolerance',
			withUnit(old.tolerance, old.resultUnit),
			withUnit(now.tolerance, now.resultUnit)
		),
		...listVariableDifferences(old.variables, now.variables)
	];
	return lines.filter((line) => line !== null);
}

/** Variables are matched by their place; one more or less is said as such. */
function listVariableDifferences(
	before: readonly VariableDraft[],
	after: readonly VariableDraft[]
): (TaskDifference | null)[] {
	const count = Math.max(before.length, after.length);
	return Array.from({ length: count }, (_, index) => index).flatMap((index) => {
		const [old, now] = [before[index], after[index]];
		const place = `Variable ${index + 1}`;
		if (!old) return [{ what: place, before: none, after: now?.name ?? '' }];
		if (!now) return [{ what: place, before: old.name, after: none }];
		const number = (label: string, key: 'min' | 'max' | 'origin' | 'scale' | 'resolution') =>
			differ(`${now.name}, ${label}`, withUnit(old[key], old.unit), withUnit(now[key], now.unit));
		return [
			differ(`${place}, name`, old.name, now.name),
			differ(`${now.name}, unit`, old.unit || none, now.unit || none),
			number('lowest', 'min'),
			number('highest', 'max'),
			number('origin', 'origin'),
			number('scale', 'scale'),
			number('resolution', 'resolution'),
			differ(`${now.name}, weight`, String(old.weight ?? none), String(now.weight ?? none))
		];
	});
}

function differ(what: string, before: string, after: string): TaskDifference | null {
	return before === after ? null : { what, before, after };
}

function withUnit(value: number | null, unit: string): string {
	return value === null ? none : `${String(value).replace('-', '−')} ${unit}`.trim();
}

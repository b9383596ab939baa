import { z } from 'zod';
import {
	FORMULA_LENGTH_MAX,
	taskRecordSchema,
	type TaskRecord,
	type TaskType
} from '$scheduler/tasks/task-record';
import { getDefaultTask } from './default-tasks';
import { findTaskFaults, type TaskFault } from './find-task-faults';
import { cartUnits, taskModels, taskTypes, type NumberField } from './task-models';

/**
 * A task that is still being written, of any model: what its form edits. A number that is not typed yet
 * is null, texts may be empty.
 */

const number = z.number().nullable();
const text = (max: number) => z.string().max(max, `Longer than ${max} characters`);

const variableDraftSchema = z.object({
	name: text(64),
	unit: text(32),
	min: number,
	max: number,
	origin: number,
	scale: number,
	resolution: number,
	/** Weight in a weighted sum; other models do not look at it. */
	weight: number.default(null)
});

export const taskDraftSchema = z.object({
	type: z.enum(taskTypes),
	/** By the keys of the model's number fields. */
	numbers: z.record(z.string().max(40), number),
	/** By the keys of the model's choice fields. */
	choices: z.record(z.string().max(40), text(40)),
	/** Only for a formula of one's own. */
	formula: text(FORMULA_LENGTH_MAX),
	resultUnit: text(32),
	tolerance: number,
	variables: z.array(variableDraftSchema).max(12, 'A task has at most 12 variables')
});

export type TaskDraft = z.infer<typeof taskDraftSchema>;
export type VariableDraft = TaskDraft['variables'][number];

export type TaskDraftReading =
	{ ok: true; record: TaskRecord } | { ok: false; faults: readonly TaskFault[] };

/** A new task of a model, with the product's defaults; a formula starts empty. */
export function createTaskDraft(type: TaskType): TaskDraft {
	if (type !== 'formula') return writeTaskDraft(getDefaultTask(type));
	return {
		...{ type, numbers: {}, choices: {}, formula: '', resultUnit: '', tolerance: null },
		variables: [emptyVariable()]
	};
}

/** A variable of which nothing has been said yet. */
export function emptyVariable(): VariableDraft {
	const open = { min: null, max: null, origin: null, scale: null, resolution: null, weight: null };
	return { name: '', unit: '', ...open };
}

/** The form's view of a task record. */
export function writeTaskDraft(record: TaskRecord): TaskDraft {
	const { numbers, choices } = taskModels[record.type];
	return {
		type: record.type,
		numbers: Object.fromEntries(numbers.map((field) => [field.key, readNumber(record, field)])),
		choices: Object.fromEntries(choices.map(({ key }) => [key, String(valueAt(record, [key]))])),
		formula: record.type === 'formula' ? record.formula : '',
		resultUnit: record.resultUnit,
		tolerance: record.tolerance,
		variables: record.variables.map((variable, index) => ({
			...variable,
			weight: record.type === 'linear' ? (record.coef[index] ?? null) : null
		}))
	};
}

/** The record a form has come to, or everything that keeps it from being one. */
export function readTaskDraft(draft: TaskDraft): TaskDraftReading {
	const faults = findTaskFaults(draft);
	if (faults.length > 0) return { ok: false, faults };
	const parsed = taskRecordSchema.safeParse(buildRecord(draft));
	if (parsed.success) return { ok: true, record: parsed.data };
	return { ok: false, faults: parsed.error.issues.map((issue) => toFault(draft, issue)) };
}

function buildRecord(draft: TaskDraft): Record<string, unknown> {
	const { type, choices, tolerance, variables } = draft;
	const record: Record<string, unknown> = {
		...{ type, ...choices, tolerance, resultUnit: readResultUnit(draft) },
		variables: variables.map(({ weight: _, ...variable }) => ({
			...variable,
			// An empty resolution means that it is not known, which the engine writes as 0.
			resolution: variable.resolution ?? 0
		}))
	};
	for (const field of taskModels[type].numbers) put(record, field, draft.numbers[field.key]);
	if (type === 'formula') record.formula = draft.formula;
	if (type === 'linear') record.coef = variables.map(({ weight }) => weight);
	return record;
}

/** The unit of the result: the lab's own word, or what the model's equations give. */
export function readResultUnit({ type, choices, resultUnit }: TaskDraft): string {
	if (type !== 'cart-pendulum') return resultUnit;
	return cartUnits[choices.measure ?? ''] ?? resultUnit;
}

function put(
	record: Record<string, unknown>,
	{ path: [name, place], emptyMeans }: NumberField,
	value: number | null | undefined
): void {
	if (name === undefined) return;
	// A number that is not asked for is left to the record's default.
	if (place === undefined) record[name] = value ?? (emptyMeans ? null : undefined);
	else {
		const list = Array.isArray(record[name]) ? record[name] : [];
		list[Number(place)] = value;
		record[name] = list;
	}
}

function readNumber(record: TaskRecord, { path }: NumberField): number | null {
	const value = valueAt(record, path);
	return typeof value === 'number' ? value : null;
}

function valueAt(record: object, path: readonly (string | number)[]): unknown {
	return path.reduce<unknown>(
		(value, step) =>
			typeof value === 'object' && value !== null ? Reflect.get(value, step) : undefined,
		record
	);
}

/** What the record itself refuses, such as constants that do not go together, said at its field. */
function toFault({ type }: TaskDraft, issue: z.core.$ZodIssue): TaskFault {
	const [first, ...rest] = issue.path.map(String);
	const field = taskModels[type].numbers.find(({ path }) => path[0] === first);
	const place = field?.label ?? 'Task';
	const name = field ? `numbers.${field.key}` : [first ?? 'type', ...rest].join('.');
	return {
		...{ code: 'not-together', level: 'fault', field: name, place },
		text: `${issue.message.charAt(0).toUpperCase()}${issue.message.slice(1)}.`,
		remedy: 'Change this number or the one it is compared with.'
	};
}

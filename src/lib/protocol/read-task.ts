import { parseFormula } from '$scheduler/tasks/formula/parse-formula';
import { taskRecordSchema, type TaskRecord } from '$scheduler/tasks/task-record';
import type { TaskDraft, VariableDraft } from './protocol-draft';

export type FormulaVerdict = { ok: true } | { ok: false; position: number; message: string };

/** Whether a formula can be read with these variables; the fault stands at a character, from 0. */
export function judgeFormula(formula: string, variables: readonly VariableDraft[]): FormulaVerdict {
	const names = variables.map(({ name }) => name).filter((name) => name !== '');
	const parsed = parseFormula(formula, names);
	return parsed.ok
		? { ok: true }
		: { ok: false, position: parsed.position, message: parsed.message };
}

/** The task as the engine takes it; null while something is missing or wrong. */
export function readTask(draft: TaskDraft): TaskRecord | null {
	const parsed = taskRecordSchema.safeParse(buildTaskRecord(draft));
	if (!parsed.success) return null;
	if (parsed.data.type !== 'formula') return parsed.data;
	return judgeFormula(draft.formula.formula, draft.formula.variables).ok ? parsed.data : null;
}

/** The engine's record with whatever was typed, unchecked. */
export function buildTaskRecord(draft: TaskDraft): unknown {
	if (draft.type === 'puck') {
		const { variables, ...numbers } = draft.puck;
		return { type: 'puck', ...numbers, resultUnit: 'm', variables: variables.map(withResolution) };
	}
	const { variables, ...formula } = draft.formula;
	return { type: 'formula', ...formula, variables: variables.map(withResolution) };
}

/** An empty resolution means that it is not known, which the engine writes as 0. */
function withResolution(variable: VariableDraft) {
	return { ...variable, resolution: variable.resolution ?? 0 };
}

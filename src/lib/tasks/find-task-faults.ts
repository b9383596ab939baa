import { parseFormula } from '$scheduler/tasks/formula/parse-formula';
import { checkNumber, type Fault } from '$lib/protocol/fault';
import type { TaskDraft } from './task-draft';
import { taskModels } from './task-models';
import { findVariableFaults } from './find-variable-faults';

/** Something that keeps a task from being run; `field` is a path into the task's draft. */
export interface TaskFault extends Fault {
	/** The character of the formula at fault, from 0. */
	readonly position?: number;
}

const place = 'Task';

/** What is missing or wrong in a draft of a task, each fault at its field. */
export function findTaskFaults(draft: TaskDraft): TaskFault[] {
	const model = taskModels[draft.type];
	const numbers = model.numbers
		.filter(({ key, emptyMeans }) => !(emptyMeans && draft.numbers[key] == null))
		.filter(({ key }) => !(key === 'impactHeight' && draft.variables.length > 2))
		.flatMap(({ key, label, unit, min, max }) =>
			checkNumber({
				...{ value: draft.numbers[key] ?? null, place, field: `numbers.${key}` },
				...{ name: label, unit, min, max }
			})
		);
	return [
		...numbers,
		...findChoiceFaults(draft),
		...checkNumber({
			...{ value: draft.tolerance, place, field: 'tolerance', name: 'Tolerance' },
			...{ unit: draft.resultUnit, min: 1e-9, max: 1e9 }
		}),
		...findCountFaults(draft),
		...draft.variables.flatMap((_, index) => findVariableFaults(draft, index)),
		...(draft.type === 'formula' ? findFormulaFaults(draft) : [])
	];
}

function findChoiceFaults({ type, choices }: TaskDraft): TaskFault[] {
	return taskModels[type].choices
		.filter(({ key, options }) => !options.some(({ value }) => value === choices[key]))
		.map(({ key, label }) => ({
			...{ code: 'choice-missing', level: 'fault', place, field: `choices.${key}` },
			text: `${label}: nothing is chosen.`,
			remedy: 'Choose one.'
		}));
}

function findCountFaults({ type, variables }: TaskDraft): TaskFault[] {
	const [least, most] = taskModels[type].variableCount;
	if (variables.length >= least && variables.length <= most) return [];
	const count = least === most ? `${least}` : `${least} to ${most}`;
	return [
		{
			...{ code: 'variable-count', level: 'fault', place, field: 'variables' },
			text: `The task has ${variables.length} variables.`,
			remedy: `Give it ${count}.`
		}
	];
}

/** Whether the formula can be read with the variables named so far. */
export function findFormulaFaults(draft: Pick<TaskDraft, 'formula' | 'variables'>): TaskFault[] {
	const at = { level: 'fault', place, field: 'formula' } as const;
	if (draft.formula.trim() === '') {
		const remedy = 'Write the signed error: 0 is a perfect trial.';
		return [{ ...at, code: 'formula-missing', text: 'The formula is empty.', remedy }];
	}
	const names = draft.variables.map(({ name }) => name).filter((name) => name !== '');
	const parsed = parseFormula(draft.formula, names);
	if (parsed.ok) return [];
	return [
		{
			...{ ...at, code: 'formula-invalid', position: parsed.position },
			text: `Character ${parsed.position + 1}: ${parsed.message}.`,
			remedy: 'Correct the formula, or name the variable it needs.'
		}
	];
}

import { createTask } from '$scheduler/tasks/create-task';
import type { TaskRecord } from '$scheduler/tasks/task-record';
import { checkNumber, type Fault } from './fault';
import { findNameFaults, findVariableFaults } from './find-variable-faults';
import { findDegenerateFaults } from './find-degenerate-faults';
import { hasAdaptiveTime } from './has-adaptive-time';
import { hasZeroInside } from './has-zero-inside';
import type { ProtocolDraft, TaskDraft } from './protocol-draft';
import { judgeFormula, readTask } from './read-task';

const place = 'Task';

/** What keeps the task from being run, and what the engine cannot do with it yet. */
export function findTaskFaults(draft: ProtocolDraft): Fault[] {
	const { task, aims } = draft;
	const variables = task.type === 'puck' ? task.puck.variables : task.formula.variables;
	const faults = [
		...(task.type === 'puck' ? findPuckFaults(task.puck) : findFormulaFaults(task.formula)),
		...variables.flatMap((variable, index) => findVariableFaults(variable, task.type, index)),
		...findNameFaults(variables, task.type)
	];
	const record = readTask(task);
	if (faults.length > 0 || !record) return faults;
	return [
		...findMissingZero(record, task.type),
		...findDegenerateFaults(record, task.type === 'puck' ? 'task.puck.D' : 'task.formula.formula'),
		...(hasAdaptiveTime(draft) && aims.region.isOn ? findUnplaceable(record, task.type) : [])
	];
}

function findPuckFaults({ mu, g, D, tolerance }: TaskDraft['puck']): Fault[] {
	const field = (name: string) => `task.puck.${name}`;
	return [
		...checkNumber({ value: mu, place, field: field('mu'), name: 'Friction', min: 0.01, max: 2 }),
		...checkNumber({
			value: g,
			place,
			field: field('g'),
			name: 'Gravity',
			unit: 'm/s²',
			min: 0.1,
			max: 30
		}),
		...checkNumber({
			value: D,
			place,
			field: field('D'),
			name: 'Target distance',
			unit: 'm',
			min: 0.05,
			max: 50
		}),
		...checkTolerance(tolerance, field('tolerance'), 'm')
	];
}

function checkTolerance(value: number | null, field: string, unit: string): Fault[] {
	return checkNumber({ value, place, field, name: 'Tolerance', unit, min: 1e-9, max: 1e9 });
}

function findFormulaFaults({ formula, tolerance, resultUnit, variables }: TaskDraft['formula']) {
	const faults = checkTolerance(tolerance, 'task.formula.tolerance', resultUnit);
	const add = (code: string, field: string, text: string, remedy: string) =>
		faults.push({ code, level: 'fault', place, field: `task.formula.${field}`, text, remedy });
	if (variables.length === 0) {
		add('no-variable', 'variables', 'The formula has no variable.', 'Add at least one variable.');
	}
	if (formula.trim() === '') {
		add(
			'formula-missing',
			'formula',
			'The formula is empty.',
			'Write the signed error: 0 is a perfect trial.'
		);
		return faults;
	}
	const verdict = judgeFormula(formula, variables);
	if (!verdict.ok) {
		const where = `Character ${verdict.position + 1}: ${verdict.message}.`;
		add('formula-invalid', 'formula', where, 'Correct the formula, or name the variable it needs.');
	}
	return faults;
}

/** A caution when no execution inside the ranges gives a perfect trial. */
function findMissingZero(record: TaskRecord, type: TaskDraft['type']): Fault[] {
	if (hasZeroInside(record) !== false) return [];
	return [
		{
			code: 'no-zero-inside',
			level: 'caution',
			place,
			field: type === 'puck' ? 'task.puck.D' : 'task.formula.formula',
			text: 'No execution inside the ranges gives an error of 0: nobody can be perfect.',
			remedy: 'Widen the ranges or change the target.'
		}
	];
}

/** Regions are placed where one or two directions are free; the rest becomes plain practice. */
function findUnplaceable(record: TaskRecord, type: TaskDraft['type']): Fault[] {
	const { variableCount, resultCount } = createTask(record);
	const free = variableCount - resultCount;
	if (free === 1 || free === 2) return [];
	const text =
		free <= 0
			? 'With as many results as variables there is only one way to be right, so there is nowhere to drive people to.'
			: `With ${variableCount} variables the ways to be right run in ${free} directions; regions can be placed for one or two, so none is placed here.`;
	return [
		{
			code: 'region-unplaceable',
			level: 'caution',
			place: 'Aims, penalized regions',
			field: type === 'formula' ? 'aims.region.isOn' : 'task.type',
			text,
			remedy:
				'Take the aim off, or know that those blocks become plain practice, with the reason said.'
		}
	];
}

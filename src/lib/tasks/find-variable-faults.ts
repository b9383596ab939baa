import { checkNumber, faultAt } from '$lib/protocol/fault';
import type { TaskFault } from './find-task-faults';
import type { TaskDraft, VariableDraft } from './task-draft';

const REACH = 1e9;

/** What is wrong with one variable of a task: name, range, origin, scale, resolution, weight. */
export function findVariableFaults({ type, variables }: TaskDraft, index: number): TaskFault[] {
	const variable = variables[index];
	if (!variable) return [];
	const place = `Task, ${variable.name || `variable ${index + 1}`}`;
	const at = (name: string) => ({ place, field: `variables.${index}.${name}` });
	const number = (key: 'min' | 'max' | 'origin' | 'weight', name: string) =>
		checkNumber({ ...at(key), value: variable[key], name, min: -REACH, max: REACH });
	const { scale, resolution } = variable;
	return [
		...findNameFaults(variables, index),
		...number('min', 'Lowest value'),
		...number('max', 'Highest value'),
		...number('origin', 'Origin'),
		...findRangeFaults(variable, at),
		...(scale === null || scale <= 0
			? [
					faultAt(
						...(['scale-missing', at('scale'), 'The scale is missing.'] as const),
						'Enter one standard deviation of a practised person.'
					)
				]
			: []),
		...(resolution !== null && resolution < 0
			? [
					faultAt(
						...(['resolution-negative', at('resolution')] as const),
						...(['The resolution is negative.', 'Enter 0 or more.'] as const)
					)
				]
			: []),
		...(type === 'linear' ? number('weight', 'Weight') : [])
	];
}

function findRangeFaults(
	{ min, max, origin }: VariableDraft,
	at: (name: string) => { place: string; field: string }
): TaskFault[] {
	if (min === null || max === null) return [];
	if (min >= max) {
		const text = `The range runs from ${min} to ${max}.`;
		return [faultAt('range-empty', at('min'), text, 'Let the lowest lie below the highest.')];
	}
	if (origin === null || (origin >= min && origin <= max)) return [];
	const text = `The origin ${origin} lies outside ${min} to ${max}.`;
	return [faultAt('origin-outside', at('origin'), text, 'Choose an origin inside the range.')];
}

/** A name that a formula or a file could not use, or that an earlier variable has. */
function findNameFaults(variables: readonly VariableDraft[], index: number): TaskFault[] {
	const { name } = variables[index] ?? { name: '' };
	const at = { place: `Task, variable ${index + 1}`, field: `variables.${index}.name` };
	if (name === '') return [faultAt('name-unreadable', at, 'The variable has no name.', readable)];
	if (!/^[A-Za-z_][A-Za-z0-9_]{0,63}$/.test(name))
		return [faultAt('name-unreadable', at, `“${name}” is no name for a variable.`, readable)];
	if (variables.findIndex((other) => other.name === name) === index) return [];
	const text = `Two variables are called ${name}.`;
	return [faultAt('name-twice', at, text, 'Give each a name of its own.')];
}

const readable = 'Use a letter, then letters, digits or underscores.';

import { checkNumber, type Fault } from './fault';
import type { TaskDraft, VariableDraft } from './protocol-draft';

/** What is wrong with one variable of the task: range, origin, scale, resolution. */
export function findVariableFaults(
	variable: VariableDraft,
	type: TaskDraft['type'],
	index: number
): Fault[] {
	const at = `Task, ${variable.name || `variable ${index + 1}`}`;
	const field = (name: string) => `task.${type}.variables.${index}.${name}`;
	const say = (code: string, name: string, text: string, remedy: string): Fault => ({
		code,
		level: 'fault',
		place: at,
		field: field(name),
		text,
		remedy
	});
	const number = (name: 'min' | 'max' | 'origin', label: string) =>
		checkNumber({
			value: variable[name],
			place: at,
			field: field(name),
			name: label,
			min: -1e9,
			max: 1e9
		});
	const { min, max, origin, scale, resolution } = variable;
	const faults = [
		...number('min', 'Lowest value'),
		...number('max', 'Highest value'),
		...number('origin', 'Origin')
	];
	if (scale === null || scale <= 0) {
		faults.push(
			say(
				'scale-missing',
				'scale',
				'The scale is missing.',
				'Enter one standard deviation of a practised person.'
			)
		);
	}
	if (resolution !== null && resolution < 0) {
		faults.push(
			say('resolution-negative', 'resolution', 'The resolution is negative.', 'Enter 0 or more.')
		);
	}
	if (min !== null && max !== null && min >= max) {
		faults.push(
			say(
				'range-empty',
				'min',
				`The range runs from ${min} to ${max}.`,
				'Let the lowest lie below the highest.'
			)
		);
	} else if (min !== null && max !== null && origin !== null && (origin < min || origin > max)) {
		faults.push(
			say(
				'origin-outside',
				'origin',
				`The origin ${origin} lies outside ${min} to ${max}.`,
				'Choose an origin inside the range.'
			)
		);
	}
	return faults;
}

/** Names that a formula or a file could not use, or that two variables share. */
export function findNameFaults(
	variables: readonly VariableDraft[],
	type: TaskDraft['type']
): Fault[] {
	return variables.flatMap(({ name }, index) => {
		const isTaken = variables.findIndex((other) => other.name === name) < index;
		const isReadable = /^[A-Za-z_][A-Za-z0-9_]{0,63}$/.test(name);
		if (isReadable && !isTaken) return [];
		return [
			{
				code: isReadable ? 'name-twice' : 'name-unreadable',
				level: 'fault' as const,
				place: `Task, variable ${index + 1}`,
				field: `task.${type}.variables.${index}.name`,
				text: isReadable
					? `Two variables are called ${name}.`
					: name === ''
						? 'The variable has no name.'
						: `“${name}” is no name for a variable.`,
				remedy: isReadable
					? 'Give each a name of its own.'
					: 'Use a letter, then letters, digits or underscores.'
			}
		];
	});
}

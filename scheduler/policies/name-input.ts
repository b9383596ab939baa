import type { TaskRecord } from '../tasks/task-record.ts';

/**
 * A place in a decision's inputs or answer, in words that people at a lab use.
 * @example nameInput(['inputs', 'state', 'last', 'trials', 3, 0], task) // 'trial 4, release_speed'
 */
export function nameInput(path: readonly (string | number)[], task: TaskRecord): string {
	const [root, part, ...rest] = path;
	if (root !== 'inputs') return `answer: ${join(path)}`;
	if (part === 'protocol') return `policy setting ${join(rest)}`;
	if (part === 'task') return `task ${join(rest)}`;
	if (part === 'rule') return `rule of the arm ${join(rest)}`.trim();
	return part === 'state' ? nameState(rest, task) : join(path);
}

function nameState(path: readonly (string | number)[], task: TaskRecord): string {
	const [part, list, trial, axis] = path;
	if (part === 'memory') return `memory ${join(path.slice(1))}`;
	if (part !== 'last') return `state ${join(path)}`;
	if (typeof trial !== 'number') return `last block, ${join(path.slice(1))}`;
	const label = `trial ${trial + 1}`;
	if (list !== 'trials') return `${label}, ${list}`;
	const variable = typeof axis === 'number' ? task.variables[axis] : undefined;
	return variable ? `${label}, ${variable.name}` : label;
}

function join(path: readonly (string | number)[]): string {
	return path
		.map((part, i) => (typeof part === 'number' ? `[${part + 1}]` : i === 0 ? part : `.${part}`))
		.join('');
}

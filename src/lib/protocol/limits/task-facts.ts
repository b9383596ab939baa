import type { ProtocolDraft } from '../protocol-draft';

type Task = ProtocolDraft['task'];

/** The task's execution variables that have a name. */
export function listVariables(task: Task): { name: string; unit: string }[] {
	const { variables } = task.type === 'puck' ? task.puck : task.formula;
	return variables.filter(({ name }) => name !== '').map(({ name, unit }) => ({ name, unit }));
}

/** Unit of the task's result; empty while nobody has said. */
export function readResultUnit(task: Task): string {
	return task.type === 'puck' ? 'm' : task.formula.resultUnit;
}

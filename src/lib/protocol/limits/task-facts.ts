import type { TaskDraft } from '../../tasks/task-draft';

/** The task's execution variables that have a name. */
export function listVariables({ variables }: TaskDraft): { name: string; unit: string }[] {
	return variables.filter(({ name }) => name !== '').map(({ name, unit }) => ({ name, unit }));
}

import type { TaskDraft, VariableDraft } from '../protocol-draft';

/** The execution variables of the task that is chosen, and the unit of its result. */
export function draftVariables(task: TaskDraft): {
	variables: readonly Pick<VariableDraft, 'name' | 'unit'>[];
	resultUnit: string;
} {
	if (task.type === 'puck') return { variables: task.puck.variables, resultUnit: 'm' };
	return { variables: task.formula.variables, resultUnit: task.formula.resultUnit };
}

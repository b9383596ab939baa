import { readResultUnit, type TaskDraft, type VariableDraft } from '../../tasks/task-draft';

/** The execution variables of the task that is chosen, and the unit of its result. */
export function draftVariables(task: TaskDraft): {
	variables: readonly Pick<VariableDraft, 'name' | 'unit'>[];
	resultUnit: string;
} {
	return { variables: task.variables, resultUnit: readResultUnit(task) };
}

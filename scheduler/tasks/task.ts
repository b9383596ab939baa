import type { Vector } from '../linear-algebra/vector.ts';
import type { TaskVariable } from './task-record.ts';

/** A map from the execution variables of one trial to a signed result: 0 is a perfect trial. */
export interface Task {
	readonly variables: readonly TaskVariable[];
	/** Unit of the result and of the tolerance. */
	readonly resultUnit: string;
	/** A trial hits when its result lies within ± tolerance. */
	readonly tolerance: number;
	/** Count of execution variables, d in the method sheet. */
	readonly variableCount: number;
	/** Count of results, r in the method sheet. */
	readonly resultCount: number;
	/**
	 * Signed result of an execution in task units; for more than one result the distance.
	 * Number.NaN where the task has no result, for instance the logarithm of a negative number: such an
	 * execution is a miss.
	 */
	evaluate(execution: Vector): number;
	/** Derivative of the result by each variable, in result unit per unit of the variable. */
	gradient(execution: Vector): number[];
}

/** Whether an execution of this result hits; an undefined result never does. */
export function isHit(task: Pick<Task, 'tolerance'>, result: number): boolean {
	return Math.abs(result) <= task.tolerance;
}

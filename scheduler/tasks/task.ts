import type { Vector } from '../linear-algebra/vector.ts';
import type { TaskVariable } from './task-variable.ts';

/** Why an execution has no valid outcome. */
export type InvalidReason =
	/** The ball meets the post before it is nearest to the target. */
	| 'post-hit'
	/** The ball stands still where it is nearest: no side of the target can be told. */
	| 'ball-at-rest'
	/** The ball does not leave the paddle upwards. */
	| 'ball-not-rising'
	/** The ball never comes to the target's plane. */
	| 'plane-not-reached'
	/** The push does not overcome friction. */
	| 'push-too-weak'
	/** The model gives no number there, for instance the logarithm of a negative number. */
	| 'no-result';

/** A map from the execution variables of one trial to signed results: 0 is a perfect trial. */
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
	 * Signed result of an execution in task units, as people see it; for more than one result the
	 * distance. Number.NaN where the task has no result, for instance the logarithm of a negative number:
	 * such an execution is a miss.
	 */
	evaluate(execution: Vector): number;
	/** Derivative of the result by each variable, in result unit per unit of the variable. */
	gradient(execution: Vector): number[];
	/**
	 * The r signed results; all 0 on the solution manifold. Smooth across executions that are invalid for
	 * another reason than `no-result`, so that the manifold can be followed.
	 */
	results(execution: Vector): number[];
	/** (r × d) derivative of each result by each variable. */
	jacobian(execution: Vector): number[][];
	/** Size up to which a result is rounding of a long computation; 0 where nothing is said. */
	readonly resultRounding?: number;
	/** Why an execution has no valid outcome; null: it has one. */
	findInvalid(execution: Vector): InvalidReason | null;
	/** Result as in `results` and validity at once, where that is cheaper than asking for each. */
	assess?(execution: Vector): { result: number; invalid: InvalidReason | null };
}

/** Whether an execution of this result hits; an undefined result never does. */
export function isHit(task: Pick<Task, 'tolerance'>, result: number): boolean {
	return Math.abs(result) <= task.tolerance;
}

/**
 * What people are shown for an execution: the size of the miss, at least 0, and a penalty where the task
 * has one; null where it has no result.
 */
export function computeCost(task: Task, execution: Vector): number | null {
	const cost = Math.abs(task.evaluate(execution));
	return Number.isFinite(cost) ? cost : null;
}

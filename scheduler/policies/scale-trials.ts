import type { Matrix } from '../linear-algebra/vector.ts';
import type { ScaledTask } from '../tasks/scaled-task.ts';

/**
 * Trials of a block in scaled coordinates, without those to which the task gives no result.
 *
 * Shapes:  trials (trials × d), task units.
 * @throws {RangeError} a trial that has not one value for each variable, with its number
 */
export function scaleTrials(
	task: ScaledTask,
	trials: Matrix
): { executions: number[][]; undefinedCount: number } {
	const executions = trials
		.map((trial, i) => {
			if (trial.length !== task.variableCount)
				throw new RangeError(
					`trial ${i + 1} has ${trial.length} values, the task has ${task.variableCount} variables`
				);
			return task.toScaled(trial);
		})
		.filter((z) => Number.isFinite(task.evaluate(z)));
	return { executions, undefinedCount: trials.length - executions.length };
}

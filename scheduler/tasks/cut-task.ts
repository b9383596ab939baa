import { entry, type Vector } from '../linear-algebra/vector.ts';
import type { Task } from './task.ts';

/**
 * A task of two variables: the others are held at a point. For pictures of tasks with more variables.
 *
 * @param axes indices of the two variables that stay free
 * @param point values of all variables, in task units
 * @throws {RangeError} an index that the task does not have
 */
export function cutTask(task: Task, axes: readonly [number, number], point: Vector): Task {
	const [first, second] = axes;
	const { assess } = task;
	const variables = axes.map((axis) => {
		const variable = task.variables[axis];
		if (!variable) throw new RangeError(`the task has no variable ${axis}`);
		return variable;
	});
	const complete = (x: Vector) =>
		point.map((value, i) => (i === first ? entry(x, 0) : i === second ? entry(x, 1) : value));
	const pick = (slopes: Vector) => [entry(slopes, first), entry(slopes, second)];
	return {
		...task,
		variables,
		variableCount: 2,
		evaluate: (x) => task.evaluate(complete(x)),
		gradient: (x) => pick(task.gradient(complete(x))),
		results: (x) => task.results(complete(x)),
		jacobian: (x) => task.jacobian(complete(x)).map(pick),
		findInvalid: (x) => task.findInvalid(complete(x)),
		...(assess && { assess: (x: Vector) => assess(complete(x)) })
	};
}

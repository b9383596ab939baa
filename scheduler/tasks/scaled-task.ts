import { entry, type Vector } from '../linear-algebra/vector.ts';
import type { Task } from './task.ts';

/**
 * A task seen in scaled coordinates z = (x − origin) / scale, in which all distances, arc lengths and
 * ellipsoids of the policies are measured (method sheet B11).
 */
export interface ScaledTask {
	readonly variableCount: number;
	readonly resultCount: number;
	readonly tolerance: number;
	/** Smallest resolution of the variables, in scaled units. */
	readonly resolution: number;
	evaluate(z: Vector): number;
	gradient(z: Vector): number[];
	/** Whether every variable lies within its range. */
	isWithinRanges(z: Vector): boolean;
	toUnits(z: Vector): number[];
	toScaled(x: Vector): number[];
}

/** Used when no variable declares its resolution. */
const RESOLUTION_UNKNOWN = 1e-3;

export function createScaledTask(task: Task): ScaledTask {
	const { variables } = task;
	const toUnits = (z: Vector) =>
		variables.map(({ origin, scale }, i) => origin + scale * entry(z, i));
	return {
		variableCount: task.variableCount,
		resultCount: task.resultCount,
		tolerance: task.tolerance,
		resolution:
			Math.min(...variables.map(({ resolution, scale }) => resolution / scale)) ||
			RESOLUTION_UNKNOWN,
		evaluate: (z) => task.evaluate(toUnits(z)),
		gradient: (z) =>
			task.gradient(toUnits(z)).map((slope, i) => slope * (variables[i]?.scale ?? Number.NaN)),
		isWithinRanges: (z) =>
			toUnits(z).every((x, i) => {
				const variable = variables[i];
				return variable !== undefined && variable.min <= x && x <= variable.max;
			}),
		toUnits,
		toScaled: (x) => variables.map(({ origin, scale }, i) => (entry(x, i) - origin) / scale)
	};
}

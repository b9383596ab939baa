import { entry, type Vector } from '../linear-algebra/vector.ts';
import type { InvalidReason, Task } from './task.ts';

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
	/** Signed results, smooth where the task is; all 0 on the manifold. */
	results(z: Vector): number[];
	/** (r × d), by scaled variables. */
	jacobian(z: Vector): number[][];
	readonly resultRounding?: number | undefined;
	findInvalid(z: Vector): InvalidReason | null;
	/** Whether every variable lies within its range. */
	isWithinRanges(z: Vector): boolean;
	toUnits(z: Vector): number[];
	toScaled(x: Vector): number[];
}

/** Used when no variable declares its resolution. */
const RESOLUTION_UNKNOWN = 1e-3;

export function createScaledTask(task: Task): ScaledTask {
	const { variables } = task;
	const origins = variables.map(({ origin }) => origin);
	const scales = variables.map(({ scale }) => scale);
	const toUnits = (z: Vector) =>
		origins.map((origin, i) => origin + entry(scales, i) * entry(z, i));
	// One array for all evaluations: a decision needs a million of them.
	const scratch = [...origins];
	const fill = (z: Vector) => {
		for (let i = 0; i < scratch.length; i++)
			scratch[i] = entry(origins, i) + entry(scales, i) * entry(z, i);
		return scratch;
	};
	const isInRange = (x: number, i: number) => {
		const variable = variables[i];
		return variable !== undefined && variable.min <= x && x <= variable.max;
	};
	return {
		variableCount: task.variableCount,
		resultCount: task.resultCount,
		tolerance: task.tolerance,
		resolution:
			Math.min(...variables.map(({ resolution, scale }) => resolution / scale)) ||
			RESOLUTION_UNKNOWN,
		evaluate: (z) => task.evaluate(fill(z)),
		gradient: (z) => task.gradient(toUnits(z)).map((slope, i) => slope * entry(scales, i)),
		resultRounding: task.resultRounding,
		results: (z) => task.results(toUnits(z)),
		jacobian: (z) =>
			task.jacobian(toUnits(z)).map((slopes) => slopes.map((slope, i) => slope * entry(scales, i))),
		findInvalid: (z) => task.findInvalid(toUnits(z)),
		isWithinRanges: (z) => fill(z).every(isInRange),
		toUnits,
		toScaled: (x) => origins.map((origin, i) => (entry(x, i) - origin) / entry(scales, i))
	};
}

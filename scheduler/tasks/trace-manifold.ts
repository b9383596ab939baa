import { add, dot, scale, type Vector } from '../linear-algebra/vector.ts';
import { computeTangent } from './project-to-manifold.ts';
import type { ScaledTask } from './scaled-task.ts';

/** A point of the manifold and its signed arc length from the start, in scaled units. */
export interface ManifoldPoint {
	readonly s: number;
	readonly z: readonly number[];
}

/** Both branches begin with the start point itself (s = 0). */
export interface ManifoldTrace {
	readonly plus: readonly ManifoldPoint[];
	readonly minus: readonly ManifoldPoint[];
}

const NEWTON_ROUNDS_MAX = 30;
const MISS_DONE = 1e-13;

/**
 * Follows the solution manifold of a two-variable task from one of its points both ways.
 *
 * Method:  half-step tangent, full step, Newton back; until the length, a bound, or the end of the
 *          manifold. plus: towards (−g₂, g₁) at the start.
 * Source:  method sheet A7, D2 step 3; traced points have result 0 (property test).
 */
export function traceManifold(
	task: ScaledTask,
	start: Vector,
	{ length, step }: { length: number; step: number }
): ManifoldTrace {
	const count = Math.round(length / step);
	return {
		plus: traceBranch({ task, start, step, count, side: 1 }),
		minus: traceBranch({ task, start, step, count, side: -1 })
	};
}

function traceBranch(options: {
	task: ScaledTask;
	start: Vector;
	step: number;
	count: number;
	side: 1 | -1;
}): ManifoldPoint[] {
	const { task, step, count, side } = options;
	const points: ManifoldPoint[] = [{ s: 0, z: [...options.start] }];
	let z: Vector = options.start;
	let heading: Vector | null = scaledTangent(task, z, side);
	let s = 0;
	for (let i = 0; i < count && heading; i++) {
		const next = stepAlong(task, z, heading, step);
		if (!next || !task.isWithinRanges(next.z)) break;
		s += step;
		({ z, heading } = next);
		points.push({ s: side * s, z });
	}
	return points;
}

function stepAlong(task: ScaledTask, z: Vector, heading: Vector, step: number) {
	const first = tangentAhead(task, z, heading);
	const middle = first && tangentAhead(task, add(z, scale(first, step / 2)), heading);
	const next = middle && returnToManifold(task, add(z, scale(middle, step)));
	return next && middle ? { z: next, heading: middle } : null;
}

function scaledTangent(task: ScaledTask, z: Vector, side: number): Vector | null {
	const tangent = computeTangent(task, z);
	return tangent && scale(tangent, side);
}

/** Tangent at z, turned to the side of the heading. */
function tangentAhead(task: ScaledTask, z: Vector, heading: Vector): number[] | null {
	const tangent = computeTangent(task, z);
	return tangent && (dot(tangent, heading) > 0 ? tangent : scale(tangent, -1));
}

/** Newton steps along the gradient until the result is 0; null when that fails. */
function returnToManifold(task: ScaledTask, start: Vector): number[] | null {
	let z: number[] = [...start];
	for (let round = 0; round < NEWTON_ROUNDS_MAX; round++) {
		const slope = task.gradient(z);
		const miss = task.evaluate(z);
		const factor = miss / dot(slope, slope);
		if (!Number.isFinite(factor)) return null;
		z = z.map((value, i) => value - (slope[i] ?? 0) * factor);
		if (Math.abs(miss) < MISS_DONE) break;
	}
	return Math.abs(task.evaluate(z)) <= 1e-6 * task.tolerance ? z : null;
}

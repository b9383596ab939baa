import { solveSquare } from '../linear-algebra/solve-square.ts';
import {
	add,
	column,
	dot,
	entry,
	norm,
	scale,
	subtract,
	type Matrix,
	type Vector
} from '../linear-algebra/vector.ts';
import { computeFreeDirections } from './free-directions.ts';
import { computeTangent } from './project-to-manifold.ts';
import type { ScaledTask } from './scaled-task.ts';
import type { InvalidReason } from './task.ts';

/** A point of the manifold and its signed arc length from the start, in scaled units. */
export interface ManifoldPoint {
	readonly s: number;
	readonly z: readonly number[];
}

/** Why a branch ends where it does. */
export type BranchEnd =
	/** As long as was asked for. */
	| 'length'
	/** The next point lies outside a variable's range. */
	| 'range'
	/** Back at the start: the manifold is a loop. */
	| 'closed'
	/** The next point has no valid outcome, for instance a ball on the post. */
	| InvalidReason
	/** The results depend on each other or have no slope: no single way on. */
	| 'singular'
	/** No solution is found one step on. */
	| 'lost';

/** Both branches begin with the start point itself (s = 0). */
export interface ManifoldTrace {
	readonly plus: readonly ManifoldPoint[];
	readonly minus: readonly ManifoldPoint[];
	readonly ends: { readonly plus: BranchEnd; readonly minus: BranchEnd };
}

const NEWTON_ROUNDS_MAX = 30;
const MISS_DONE = 1e-13;

/**
 * Follows the solution manifold of a task with one free direction from one of its points both ways.
 *
 * Units:   arc length and step scaled.
 * Method:  half-step tangent, full step, Newton back; until the length, a bound, an invalid execution, a
 *          singular place or the end of the manifold. plus: towards (−g₂, g₁) at the start for one
 *          result of two variables, else towards the first free direction there.
 * Source:  method sheet A6, A7, D2 step 3; traced points have result 0 (tasks.property.test.ts).
 *          A task with more free directions gives the start alone; see trace-surface.ts.
 */
export function traceManifold(
	task: ScaledTask,
	start: Vector,
	{ length, step, closes = false }: { length: number; step: number; closes?: boolean }
): ManifoldTrace {
	const count = Math.round(length / step);
	const plus = traceBranch({ task, start, step, count, closes, side: 1 });
	const minus = traceBranch({ task, start, step, count, closes, side: -1 });
	const ends = { plus: plus.end, minus: minus.end };
	return { plus: plus.points, minus: minus.points, ends };
}

function traceBranch(options: {
	task: ScaledTask;
	start: Vector;
	step: number;
	count: number;
	closes: boolean;
	side: 1 | -1;
}): { points: ManifoldPoint[]; end: BranchEnd } {
	const { task, step, count, side } = options;
	const points: ManifoldPoint[] = [{ s: 0, z: [...options.start] }];
	let z: Vector = options.start;
	let heading: Vector | null = scaledTangent(task, z, side);
	let s = 0;
	for (let i = 0; i < count; i++) {
		if (!heading) return { points, end: 'singular' };
		const next: Step = stepAlong(task, z, heading, step);
		if (!next.ok) return { points, end: next.reason };
		if (!task.isWithinRanges(next.z)) return { points, end: 'range' };
		const invalid = task.findInvalid(next.z);
		if (invalid) return { points, end: invalid };
		s += step;
		({ z, heading } = next);
		points.push({ s: side * s, z });
		if (options.closes && i > 1 && norm(subtract(z, options.start)) < step)
			return { points, end: 'closed' };
	}
	return { points, end: 'length' };
}

type Step = { ok: true; z: Vector; heading: Vector } | { ok: false; reason: 'singular' | 'lost' };

function stepAlong(task: ScaledTask, z: Vector, heading: Vector, step: number): Step {
	const first = tangentAhead(task, z, heading);
	const middle = first && tangentAhead(task, add(z, scale(first, step / 2)), heading);
	if (!middle) return { ok: false, reason: 'singular' };
	const next = returnToManifold(task, add(z, scale(middle, step)));
	return next ? { ok: true, z: next, heading: middle } : { ok: false, reason: 'lost' };
}

function scaledTangent(task: ScaledTask, z: Vector, side: number): Vector | null {
	const tangent = findTangent(task, z);
	return tangent && scale(tangent, side);
}

/** Tangent at z, turned to the side of the heading. */
function tangentAhead(task: ScaledTask, z: Vector, heading: Vector): Vector | null {
	const tangent = findTangent(task, z);
	return tangent && (dot(tangent, heading) > 0 ? tangent : scale(tangent, -1));
}

function findTangent(task: ScaledTask, z: Vector): Vector | null {
	if (task.resultCount === 1) return computeTangent(task, z);
	if (task.variableCount - task.resultCount !== 1) return null;
	return computeFreeDirections(task, z)?.[0] ?? null;
}

/** Newton steps along the gradients until all results are 0; null when that fails. */
export function returnToManifold(task: ScaledTask, start: Vector): number[] | null {
	const missDone = Math.max(MISS_DONE, task.resultRounding ?? 0);
	let z: number[] = [...start];
	for (let round = 0; round < NEWTON_ROUNDS_MAX; round++) {
		const misses = task.results(z);
		const step = findCorrection(task.jacobian(z), misses);
		if (!step?.every(Number.isFinite)) return null;
		z = subtract(z, step);
		if (norm(misses) < missDone) break;
	}
	return norm(task.results(z)) <= 1e-6 * task.tolerance ? z : null;
}

/** The shortest step that undoes the misses, to first order: Jᵀ·(J·Jᵀ)⁻¹·f. */
function findCorrection(jacobian: Matrix, misses: Vector): number[] | null {
	const [slope = [], ...others] = jacobian;
	if (others.length === 0) {
		const factor = entry(misses, 0) / dot(slope, slope);
		return Number.isFinite(factor) ? slope.map((value) => value * factor) : null;
	}
	const factors = solveSquare(
		jacobian.map((left) => jacobian.map((right) => dot(left, right))),
		misses
	);
	return factors && slope.map((_, i) => dot(factors, column(jacobian, i)));
}

import { z } from 'zod';
import { createTask } from '../../tasks/create-task.ts';
import { findDegeneracies } from '../../tasks/find-degeneracies.ts';
import { findSolutions, traceBranches } from '../../tasks/find-solutions.ts';
import { projectToManifold } from '../../tasks/project-to-manifold.ts';
import { createScaledTask, type ScaledTask } from '../../tasks/scaled-task.ts';
import type { Task } from '../../tasks/task.ts';
import {
	traceManifold,
	type ManifoldPoint,
	type ManifoldTrace
} from '../../tasks/trace-manifold.ts';
import { traceSurface } from '../../tasks/trace-surface.ts';
import { diagonal } from '../../linear-algebra/matrix.ts';
import { readableTaskSchema } from '../trial-inputs.ts';

const numbers = z.array(z.number());

export const manifoldInputSchema = z
	.strictObject({
		task: readableTaskSchema,
		start: numbers
			.optional()
			.describe('execution near which to begin, in task units; without it every branch is traced'),
		length: z.number().positive().max(1000).default(60).describe('each way, in baseline SD'),
		step: z.number().min(0.001).max(5).default(0.05).describe('in baseline SD'),
		spacing: z.number().min(0.02).max(5).default(0.25).describe('of a surface’s points, in SD')
	})
	.refine(({ task, start }) => !start || start.length === task.variables.length, {
		error: 'start needs one value for each variable',
		path: ['start']
	});

const pointSchema = z.strictObject({
	/** Arc length from the start along the manifold, in baseline SD. */
	s: z.number(),
	/** Execution in task units. */
	x: numbers
});

export const manifoldSchema = z.strictObject({
	/** Count of free directions: variables less results. */
	freeCount: z.int(),
	degeneracies: z.array(
		z.strictObject({ code: z.string(), values: z.record(z.string(), z.unknown()) })
	),
	found: z.union([
		z.strictObject({ ok: z.literal(false), reason: z.string() }),
		z.strictObject({ ok: z.literal(true), kind: z.literal('points'), points: z.array(numbers) }),
		z.strictObject({
			...{ ok: z.literal(true), kind: z.literal('curves') },
			branches: z.array(
				z.strictObject({
					points: z.array(pointSchema).describe('from one end to the other'),
					ends: z.strictObject({ minus: z.string(), plus: z.string() }),
					isClosed: z.boolean()
				})
			)
		}),
		z.strictObject({
			...{ ok: z.literal(true), kind: z.literal('surface'), points: z.array(pointSchema) },
			isComplete: z.boolean()
		})
	])
});

type ManifoldInput = z.output<typeof manifoldInputSchema>;

/** The solution manifold of a task, by arc length in scaled coordinates. */
export function describeManifold(input: ManifoldInput) {
	const task = createTask(input.task);
	const freeCount = task.variableCount - task.resultCount;
	const degeneracies = findDegeneracies(input.task);
	return { freeCount, degeneracies, found: trace(task, createScaledTask(task), input) };
}

function trace(task: Task, scaled: ScaledTask, input: ManifoldInput) {
	const freeCount = task.variableCount - task.resultCount;
	if (freeCount > 2) return { ok: false, reason: 'more-than-two-free-directions' };
	if (freeCount < 0) return { ok: false, reason: 'more-results-than-variables' };
	const start = input.start && findStart(scaled, input.start);
	if (input.start && !start) return { ok: false, reason: 'no-solution-near' };
	if (freeCount === 1) {
		const { length, step } = input;
		const traces = start
			? [traceManifold(scaled, start, { length, step, closes: true })]
			: traceBranches(task, scaled, { length, step });
		if (traces.length === 0) return { ok: false, reason: 'no-solution-in-ranges' };
		return {
			ok: true,
			kind: 'curves',
			branches: traces.map((found) => describeBranch(scaled, found))
		};
	}
	const solutions = start ? [start] : findSolutions(task, scaled, input.spacing);
	const [first] = solutions;
	if (!first) return { ok: false, reason: 'no-solution-in-ranges' };
	if (freeCount === 0)
		return { ok: true, kind: 'points', points: solutions.map((point) => scaled.toUnits(point)) };
	const surface = traceSurface(scaled, start ?? nearestToOrigin(solutions, first), {
		...{ reach: input.length, spacing: input.spacing }
	});
	if (surface.points.length === 0) return { ok: false, reason: 'singular' };
	const points = surface.points.map((point) => toUnits(scaled, point));
	return { ok: true, kind: 'surface', points, isComplete: surface.isComplete };
}

function findStart(scaled: ScaledTask, start: readonly number[]): number[] | null {
	const covariance = diagonal(start.map(() => 1));
	const nearest = projectToManifold({ task: scaled, mean: scaled.toScaled(start), covariance });
	return nearest.ok ? nearest.point : null;
}

function nearestToOrigin(solutions: readonly number[][], first: number[]): number[] {
	const size = (z: readonly number[]) => Math.hypot(...z);
	return solutions.reduce((best, z) => (size(z) < size(best) ? z : best), first);
}

function describeBranch(scaled: ScaledTask, { plus, minus, ends }: ManifoldTrace) {
	const isClosed = ends.plus === 'closed';
	const points = isClosed ? plus : [...minus.slice(1).reverse(), ...plus];
	return { points: points.map((point) => toUnits(scaled, point)), ends, isClosed };
}

function toUnits(scaled: ScaledTask, { s, z }: ManifoldPoint) {
	return { s, x: scaled.toUnits(z) };
}

import {
	dot,
	multiplyVector,
	norm,
	subtract,
	type Matrix,
	type Vector
} from '../linear-algebra/vector.ts';
import type { ScaledTask } from './scaled-task.ts';

export type Projection =
	| { ok: true; point: number[] }
	/** The result has no slope there, or no solution is found near. */
	| { ok: false; reason: 'no-solution-near' };

const ROUNDS_MAX = 200;
const STEP_DONE = 1e-13;
/** Part of the tolerance by which a found solution may miss. */
const MISS_SHARE_MAX = 1e-6;

/**
 * The point of the solution manifold nearest to a cloud's mean, in the cloud's own metric.
 *
 * Shapes:  mean (d), covariance (d × d), both scaled; point (d).
 * Method:  z ← m − Σg·(f + g·(m − z)) / (gᵀΣg) until it stands still (SQP, at most 200 rounds).
 * Source:  method sheet D2 step 2; case policy-placement-projectile (z0).
 */
export function projectToManifold(options: {
	task: ScaledTask;
	mean: Vector;
	covariance: Matrix;
}): Projection {
	const { task, mean, covariance } = options;
	let z = [...mean];
	for (let round = 0; round < ROUNDS_MAX; round++) {
		const slope = task.gradient(z);
		const spread = multiplyVector(covariance, slope);
		const miss = task.evaluate(z) + dot(slope, subtract(mean, z));
		const factor = miss / dot(slope, spread);
		const next = mean.map((value, i) => value - (spread[i] ?? 0) * factor);
		if (!next.every(Number.isFinite)) return { ok: false, reason: 'no-solution-near' };
		if (norm(subtract(next, z)) < STEP_DONE) break;
		z = next;
	}
	const isSolution = Math.abs(task.evaluate(z)) <= MISS_SHARE_MAX * task.tolerance;
	return isSolution ? { ok: true, point: z } : { ok: false, reason: 'no-solution-near' };
}

/**
 * Unit tangent (−g₂, g₁) / |g| of the manifold of a two-variable task; null where there is no single
 * free direction.
 */
export function computeTangent(task: ScaledTask, z: Vector): [number, number] | null {
	if (task.variableCount !== 2 || task.resultCount !== 1) return null;
	const [first = 0, second = 0] = task.gradient(z);
	const length = Math.hypot(first, second);
	if (!(length > 0) || !Number.isFinite(length)) return null;
	return [-second / length, first / length];
}

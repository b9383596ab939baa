import { solveSquare } from '../linear-algebra/solve-square.ts';
import {
	add,
	column,
	dot,
	entry,
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
/** Where results carry rounding of their own. */
const STEP_DONE_ROUNDED = 1e-6;
/** Part of the tolerance by which a found solution may miss. */
const MISS_SHARE_MAX = 1e-6;

/**
 * The point of the solution manifold nearest to a cloud's mean, in the cloud's own metric.
 *
 * Shapes:  mean (d), covariance (d × d), both scaled; point (d).
 * Method:  z ← m − Σ·Jᵀ·(J·Σ·Jᵀ)⁻¹·(f + J·(m − z)) until it stands still (SQP, at most 200 rounds).
 * Source:  method sheet D2 step 2; case policy-placement-projectile (z0).
 */
export function projectToManifold(options: {
	task: ScaledTask;
	mean: Vector;
	covariance: Matrix;
}): Projection {
	const { task, mean } = options;
	const stepDone = task.resultRounding ? STEP_DONE_ROUNDED : STEP_DONE;
	let z = [...mean];
	for (let round = 0; round < ROUNDS_MAX; round++) {
		const next = task.resultCount === 1 ? approachOne(options, z) : approachSeveral(options, z);
		if (!next?.every(Number.isFinite)) return { ok: false, reason: 'no-solution-near' };
		if (norm(subtract(next, z)) < stepDone) break;
		z = next;
	}
	const miss = norm(task.results(z));
	const isSolution = miss <= MISS_SHARE_MAX * task.tolerance && task.findInvalid(z) === null;
	return isSolution ? { ok: true, point: z } : { ok: false, reason: 'no-solution-near' };
}

type Approach = (
	options: { task: ScaledTask; mean: Vector; covariance: Matrix },
	z: Vector
) => number[] | null;

const approachOne: Approach = ({ task, mean, covariance }, z) => {
	const [slope = []] = task.jacobian(z);
	const spread = multiplyVector(covariance, slope);
	const miss = entry(task.results(z), 0) + dot(slope, subtract(mean, z));
	const factor = miss / dot(slope, spread);
	return mean.map((value, i) => value - (spread[i] ?? 0) * factor);
};

const approachSeveral: Approach = ({ task, mean, covariance }, z) => {
	const jacobian = task.jacobian(z);
	const ahead = multiplyVector(jacobian, subtract(mean, z));
	const spreads = jacobian.map((slope) => multiplyVector(covariance, slope));
	const gains = jacobian.map((slope) => spreads.map((spread) => dot(slope, spread)));
	const factors = solveSquare(gains, add(task.results(z), ahead));
	return factors && mean.map((value, i) => value - dot(factors, column(spreads, i)));
};

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

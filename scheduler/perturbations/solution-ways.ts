import { computeSymmetricEigen } from '../linear-algebra/symmetric-eigen.ts';
import {
	column,
	dot,
	multiplyVector,
	norm,
	quadraticForm,
	scale,
	subtract,
	type Matrix,
	type Vector
} from '../linear-algebra/vector.ts';
import { computeFreeDirections } from '../tasks/free-directions.ts';
import { computeTangent } from '../tasks/project-to-manifold.ts';
import type { ScaledTask } from '../tasks/scaled-task.ts';
import { traceManifold } from '../tasks/trace-manifold.ts';
import { traceSurface } from '../tasks/trace-surface.ts';

/** A place on the manifold. */
export interface WayPoint {
	/** Arc length from the start; negative on the minus side. */
	readonly s: number;
	readonly z: readonly number[];
	/** SD of the cloud along the way from the start to here, scaled. */
	readonly sd: number;
}

/** The manifold about a start, in two halves by growing distance; both begin with the start. */
export interface SolutionWays {
	/** Free directions at the start, the one along which the cloud is widest first, and its SDs there. */
	readonly directions: Matrix;
	readonly sds: readonly number[];
	readonly plus: readonly WayPoint[];
	readonly minus: readonly WayPoint[];
	/** Two free directions: the halves are sheets, and their points have neighbours on all sides. */
	readonly isSurface: boolean;
}

export type WaysRefusal =
	/** Three or more free directions (d − r ≥ 3). */
	| 'more-free-directions'
	/** As many results as variables: one solution only. */
	| 'no-free-direction'
	/** The results depend on each other there: the solutions change their dimension. */
	| 'singular-place'
	| 'no-solution-near';

/** Points of a surface from its start to its edge. */
const SURFACE_STEPS = 14;
/** Part by which the net goes beyond the farthest way that counts. */
const SURFACE_MARGIN = 1.1;

/**
 * The ways along the solutions from one of them.
 *
 * Shapes:  start (d), covariance (d × d), scaled.
 * Method:  one free direction: traced both ways by arc length. Two: sampled Newton projections, arc length
 *          by the shortest way through their graph; the halves lie on either side of the start along the
 *          cloud's widest free direction. A net has about 14 points from its start to its edge.
 * Source:  method sheet D2 step 3, A7 (d − r = 2).
 * Accuracy: one direction, to the step; two, lengths up to 5 % too long, exits to a spacing of the net.
 */
export function findSolutionWays(options: {
	task: ScaledTask;
	start: Vector;
	covariance: Matrix;
	/** How far the solutions are followed, scaled, and on a surface also in SD of the widest direction. */
	length: number;
	lengthSd: number;
	step: number;
}): { ok: true; ways: SolutionWays } | { ok: false; reason: WaysRefusal } {
	const { task } = options;
	const freeCount = task.variableCount - task.resultCount;
	if (freeCount < 1) return { ok: false, reason: 'no-free-direction' };
	if (freeCount > 2) return { ok: false, reason: 'more-free-directions' };
	return freeCount === 1 ? followCurve(options) : spreadOverSurface(options);
}

type Request = Parameters<typeof findSolutionWays>[0];

function followCurve({ task, start, covariance, length, step }: Request) {
	const isPlane = task.variableCount === 2;
	const tangent = isPlane ? computeTangent(task, start) : computeFreeDirections(task, start)?.[0];
	if (!tangent)
		return { ok: false, reason: isPlane ? 'no-solution-near' : 'singular-place' } as const;
	const sd = Math.sqrt(quadraticForm(covariance, tangent));
	const { plus, minus } = traceManifold(task, start, { length, step });
	const place = ({ s, z }: { s: number; z: readonly number[] }) => ({ s, z, sd });
	return {
		ok: true,
		ways: {
			...{ directions: [tangent], sds: [sd], isSurface: false },
			plus: plus.map(place),
			minus: minus.map(place)
		}
	} as const;
}

function spreadOverSurface({ task, start, covariance, length, lengthSd }: Request) {
	const basis = computeFreeDirections(task, start);
	if (!basis) return { ok: false, reason: 'singular-place' } as const;
	const directions = turnToCloud(basis, covariance);
	const sds = directions.map((direction) => Math.sqrt(quadraticForm(covariance, direction)));
	const [widest = []] = directions;
	const reach = Math.min(length, SURFACE_MARGIN * lengthSd * (sds[0] ?? 0));
	const surface = traceSurface(task, start, { reach, spacing: reach / SURFACE_STEPS });
	const [first, ...others] = surface.points;
	if (!first) return { ok: false, reason: 'no-solution-near' } as const;
	const center = { s: 0, z: [...start], sd: sds[0] ?? 0 };
	const placed = others
		.map(({ s, z }) => {
			const side = dot(subtract(z, start), widest) >= 0 ? 1 : -1;
			return { s: side * s, z, sd: computeSdTowards(z, { start, directions, covariance }) };
		})
		.sort((a, b) => Math.abs(a.s) - Math.abs(b.s));
	return {
		ok: true,
		ways: {
			...{ directions, sds, isSurface: true },
			plus: [center, ...placed.filter(({ s }) => s >= 0)],
			minus: [center, ...placed.filter(({ s }) => s < 0)]
		}
	} as const;
}

/** The same plane, its axes turned to those of the cloud within it, the widest first. */
function turnToCloud(basis: Matrix, covariance: Matrix): number[][] {
	const within = basis.map((u) => basis.map((v) => dot(u, multiplyVector(covariance, v))));
	const { vectors } = computeSymmetricEigen(within);
	return [...vectors]
		.reverse()
		.map((weights) => (basis[0] ?? []).map((_, i) => dot(weights, column(basis, i))));
}

/** SD of the cloud along the straight way to a point, as far as that runs in the tangent plane. */
function computeSdTowards(
	z: Vector,
	{ start, directions, covariance }: { start: Vector; directions: Matrix; covariance: Matrix }
): number {
	const way = subtract(z, start);
	const parts = directions.map((direction) => dot(way, direction));
	const flat = way.map((_, i) => dot(parts, column(directions, i)));
	const length = norm(flat);
	const direction = length > 0 ? scale(flat, 1 / length) : (directions[0] ?? []);
	return Math.sqrt(quadraticForm(covariance, direction));
}

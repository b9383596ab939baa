import { computeCholesky, solveLower } from '../linear-algebra/cholesky.ts';
import { entry, multiplyVector, type Matrix, type Vector } from '../linear-algebra/vector.ts';
import type { ScaledTask } from '../tasks/scaled-task.ts';
import { computeNormalPoints } from '../statistics/r-sequence.ts';

/** What a person's cloud would do at another place: which of its points hit, and how many fall off. */
export interface CarriedCloud {
	readonly hits: readonly boolean[];
	readonly hitShare: number;
	/** Share of points outside the variables' ranges; computed when first asked for. */
	edgeShare(): number;
}

/**
 * A normal cloud as a fixed set of points that can be moved about the task.
 *
 * Whitened coordinates w = L⁻¹·z (L·Lᵀ = Σ) make every ellipsoid of the cloud's own shape a ball.
 */
export interface CloudPoints {
	readonly count: number;
	whiten(z: Vector): number[];
	/** The cloud with its mean carried to z. */
	carryTo(z: Vector): CarriedCloud;
	/** Points inside the ball of squared radius k² around `offset` (whitened), among those counted. */
	countInside(options: { offset: Vector; kSquared: number; among?: readonly boolean[] }): number;
}

/**
 * Makes the point set of a cloud.
 *
 * Method:  `pointCount` points of the R-sequence through Φ⁻¹: no random numbers.
 * Source:  method sheet D2 step 4b.
 */
export function createCloudPoints(options: {
	task: ScaledTask;
	covariance: Matrix;
	pointCount: number;
}): { ok: true; points: CloudPoints } | { ok: false; reason: 'singular-cloud' } {
	const { task, covariance, pointCount } = options;
	const factor = computeCholesky(covariance);
	if (!factor.ok) return { ok: false, reason: 'singular-cloud' };
	const whitePoints = computeNormalPoints(pointCount, covariance.length);
	const offsets = whitePoints.map((point) => multiplyVector(factor.lower, point));
	return {
		ok: true,
		points: {
			count: pointCount,
			whiten: (z) => solveLower(factor.lower, z),
			carryTo: (z) => carryCloud(task, offsets, z),
			countInside: (request) => countInside(whitePoints, request)
		}
	};
}

function carryCloud(task: ScaledTask, offsets: Matrix, z: Vector): CarriedCloud {
	const point = [...z];
	const hits = offsets.map((offset) => {
		moveTo(point, z, offset);
		return Math.abs(task.evaluate(point)) <= task.tolerance;
	});
	const edgeShare = once(() => {
		const isBeyond = (offset: Vector) => {
			moveTo(point, z, offset);
			return !task.isWithinRanges(point);
		};
		return offsets.filter(isBeyond).length / offsets.length;
	});
	return { hits, hitShare: hits.filter(Boolean).length / offsets.length, edgeShare };
}

/** point := z + offset, in place: this runs a million times in one decision. */
function moveTo(point: number[], z: Vector, offset: Vector): void {
	for (let i = 0; i < point.length; i++) point[i] = entry(z, i) + entry(offset, i);
}

/** Remembers the first result of a costly computation. */
export function once<T>(compute: () => T): () => T {
	let known: { value: T } | null = null;
	return () => (known ??= { value: compute() }).value;
}

function countInside(
	points: Matrix,
	{ offset, kSquared, among }: { offset: Vector; kSquared: number; among?: readonly boolean[] }
): number {
	let count = 0;
	for (let i = 0; i < points.length; i++) {
		if (among && !among[i]) continue;
		const point = points[i] ?? [];
		let square = 0;
		for (let j = 0; j < offset.length; j++) square += (entry(point, j) + entry(offset, j)) ** 2;
		if (square <= kSquared) count += 1;
	}
	return count;
}

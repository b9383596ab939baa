import {
	add,
	dot,
	entry,
	norm,
	scale,
	subtract,
	type Matrix,
	type Vector
} from '../linear-algebra/vector.ts';
import { computeFreeDirections } from './free-directions.ts';
import { NeighbourGrid } from './neighbour-grid.ts';
import type { ScaledTask } from './scaled-task.ts';
import { computeShortestWays, type Edge } from './shortest-ways.ts';
import { returnToManifold } from './trace-manifold.ts';

/** A point of a manifold of two free directions. */
export interface SurfacePoint {
	/** Length of the shortest way along the manifold from the start, scaled. */
	readonly s: number;
	readonly z: readonly number[];
	/** Two orthonormal directions of the manifold there. */
	readonly free: Matrix;
}

export interface SurfaceTrace {
	/** The start first, then by growing distance of their finding. */
	readonly points: readonly SurfacePoint[];
	/** False: more points lie within reach than were asked for. */
	readonly isComplete: boolean;
}

export interface SurfaceRequest {
	/** Farthest way from the start, scaled. */
	readonly reach: number;
	/** Distance of neighbouring points, scaled. */
	readonly spacing: number;
	readonly countMax?: number;
}

/** Directions in which the net of points grows from each point. */
const GROWTH_DIRECTIONS = 6;
/** A new point must be this far from all others, in spacings. */
const CROWDED = 0.7;
/** Points this near are joined, in spacings: about 28 neighbours each. */
const JOINED = 2.8;
/** Farthest that a Newton return may move a point, in spacings. */
const RETURN_MAX = 0.5;

/**
 * The solution manifold of a task with two free directions as a net of points, each with the length of the
 * shortest way to it along the manifold.
 *
 * Units:   scaled.
 * Method:  the net grows from the start: six steps in the tangent plane of each point, each returned to the
 *          manifold by Newton; points nearer than 2.8 spacings are joined where the manifold joins them; arc
 *          length is that of the shortest way through the net.
 * Source:  method sheet A7. Accuracy: lengths up to 5 % too long, on a plane and on a ball
 *          (trace-surface.test.ts); results 0 to 1e-12.
 * @throws {RangeError} a task that has not exactly two free directions
 */
export function traceSurface(
	task: ScaledTask,
	start: Vector,
	{ reach, spacing, countMax = 8000 }: SurfaceRequest
): SurfaceTrace {
	if (task.variableCount - task.resultCount !== 2)
		throw new RangeError('traceSurface requires exactly two more variables than results');
	const grid = new NeighbourGrid(JOINED * spacing);
	const free: Matrix[] = [];
	const found = (z: Vector) => {
		const directions = computeFreeDirections(task, z);
		if (!directions) return;
		grid.add(z);
		free.push(directions);
	};
	found(start);
	for (let i = 0; i < grid.points.length && grid.points.length < countMax; i++)
		for (const guess of spreadAround(grid.points[i] ?? [], free[i] ?? [], spacing)) {
			const z = returnToManifold(task, guess);
			if (!z || norm(subtract(z, guess)) > RETURN_MAX * spacing) continue;
			if (norm(subtract(z, start)) > reach || !task.isWithinRanges(z)) continue;
			if (grid.findNear(z, CROWDED * spacing).length > 0 || task.findInvalid(z)) continue;
			found(z);
		}
	const lengths = computeShortestWays(joinPoints(grid, free, spacing), 0);
	const points = grid.points.map((z, i) => ({ s: entry(lengths, i), z, free: free[i] ?? [] }));
	return {
		points: points.filter(({ s }) => s <= reach),
		isComplete: grid.points.length < countMax
	};
}

function spreadAround(z: Vector, [first = [], second = []]: Matrix, spacing: number): number[][] {
	return Array.from({ length: GROWTH_DIRECTIONS }, (_, k) => {
		const angle = (2 * Math.PI * k) / GROWTH_DIRECTIONS;
		const direction = add(scale(first, Math.cos(angle)), scale(second, Math.sin(angle)));
		return add(z, scale(direction, spacing));
	});
}

function joinPoints(grid: NeighbourGrid, free: readonly Matrix[], spacing: number): Edge[][] {
	return grid.points.map((z, i) =>
		grid.findNear(z, JOINED * spacing).flatMap((to) => {
			const way = subtract(grid.points[to] ?? [], z);
			const length = norm(way);
			const isAlong = liesAlong(way, free[i] ?? []) && liesAlong(way, free[to] ?? []);
			return to !== i && isAlong ? [{ to, length }] : [];
		})
	);
}

/** Whether a way runs in the manifold rather than across to another sheet of it. */
function liesAlong(way: Vector, directions: Matrix): boolean {
	const along = Math.hypot(...directions.map((direction) => dot(way, direction)));
	return along > 0.8 * norm(way);
}

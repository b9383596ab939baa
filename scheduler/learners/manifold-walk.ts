import { norm, subtract, type Vector } from '../linear-algebra/vector.ts';
import { projectToManifold } from '../tasks/project-to-manifold.ts';
import type { ScaledTask } from '../tasks/scaled-task.ts';
import { traceManifold, type ManifoldPoint } from '../tasks/trace-manifold.ts';

/** The solution manifold of a two-variable task as a line with places on it. */
export type ManifoldWalk = {
	/** The point at an arc length; beyond the ends, the end. */
	at(place: number): Vector;
	/** A place brought back between the ends. */
	keep(place: number): number;
	/** The place whose point is nearest to a point of the plane. */
	nearestPlace(point: Vector): number;
};

const LENGTH = 10;
const STEP = 0.02;

const walks = new WeakMap<ScaledTask, ManifoldWalk>();

/**
 * The manifold of a task, from the solution nearest to the origin, 10 scaled units both ways or to
 * the ranges' end. Remembered for each task.
 * Accuracy: points lie on a grid of 0.02.
 * @throws RangeError when no solution lies near the origin
 */
export function walkManifold(task: ScaledTask): ManifoldWalk {
	const known = walks.get(task);
	if (known) return known;
	const made = createWalk(listPoints(task));
	walks.set(task, made);
	return made;
}

function listPoints(task: ScaledTask): ManifoldPoint[] {
	const covariance = [
		[1, 0],
		[0, 1]
	];
	const start = projectToManifold({ task, mean: [0, 0], covariance });
	if (!start.ok) throw new RangeError("no solution lies near the task's origin");
	const { plus, minus } = traceManifold(task, start.point, { length: LENGTH, step: STEP });
	return [...minus.slice(1).reverse(), ...plus];
}

function createWalk(points: readonly ManifoldPoint[]): ManifoldWalk {
	const [first, last] = [points[0], points.at(-1)];
	if (!first || !last) throw new RangeError('the manifold has no point');
	const keep = (place: number) => Math.min(last.s, Math.max(first.s, place));
	return {
		keep,
		at: (place) => points[Math.round((keep(place) - first.s) / STEP)]?.z ?? last.z,
		nearestPlace: (point) => {
			const distanceTo = ({ z }: ManifoldPoint) => norm(subtract(z, point));
			return points.reduce((a, b) => (distanceTo(b) < distanceTo(a) ? b : a)).s;
		}
	};
}

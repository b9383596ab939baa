import { dot, entry, row, scale, subtract, type Matrix } from '../linear-algebra/vector.ts';
import { projectToManifold } from '../tasks/project-to-manifold.ts';
import type { ScaledTask } from '../tasks/scaled-task.ts';
import { createCloudPoints, once, type CarriedCloud, type CloudPoints } from './carried-cloud.ts';
import type { PlacementSettings } from './region-settings.ts';
import { findSolutionWays, type WaysRefusal, type WayPoint } from './solution-ways.ts';

/** Mean and covariance in scaled units and the trials behind them. */
export interface Cloud {
	readonly n: number;
	readonly mean: readonly number[];
	readonly cov: Matrix;
}

/** Why the engine cannot place a region at all. */
export type PlacementRefusal = WaysRefusal | 'singular-cloud';

export interface TracePoint extends WayPoint {
	/** Whitened place. */
	readonly w: readonly number[];
	/** The cloud carried here; computed when first asked for. */
	carried(): CarriedCloud;
}

/** What all shares and leans of one placement have in common. */
export interface PlacementGround {
	readonly task: ScaledTask;
	readonly cloud: Cloud;
	readonly settings: PlacementSettings;
	readonly points: CloudPoints;
	/** Nearest solution to the mean, and the cloud's SD along its widest free direction there. */
	readonly z0: readonly number[];
	readonly sdTangent: number;
	/** Free directions at z0, the one along which the cloud is widest first, and its SDs there. */
	readonly directions: Matrix;
	readonly sds: readonly number[];
	readonly isSurface: boolean;
	readonly plus: readonly TracePoint[];
	readonly minus: readonly TracePoint[];
	/** The cloud where it is now. */
	readonly here: CarriedCloud;
}

/**
 * Finds the ways along the solutions and prepares the cloud's point set: everything that does not depend on the share.
 *
 * Source:  method sheet D2 steps 2 and 3.
 */
export function preparePlacement(options: {
	task: ScaledTask;
	cloud: Cloud;
	settings: PlacementSettings;
}): { ok: true; ground: PlacementGround } | { ok: false; reason: PlacementRefusal } {
	const { task, cloud, settings } = options;
	const refusal = findDimensionRefusal(task);
	if (refusal) return { ok: false, reason: refusal };
	const made = createCloudPoints({ task, covariance: cloud.cov, pointCount: settings.pointCount });
	if (!made.ok) return made;
	const { points } = made;
	const nearest = projectToManifold({ task, mean: cloud.mean, covariance: cloud.cov });
	if (!nearest.ok) return nearest;
	const found = findSolutionWays({
		...{ task, start: nearest.point, covariance: cloud.cov },
		...{ length: settings.lengthMax, lengthSd: settings.reachMaxSd, step: settings.step }
	});
	if (!found.ok) return found;
	const { plus, minus, directions, sds, isSurface } = found.ways;
	const prepare = (point: WayPoint): TracePoint => ({
		...point,
		w: points.whiten(point.z),
		carried: once(() => points.carryTo(point.z))
	});
	return {
		ok: true,
		ground: {
			...{ task, cloud, settings, points, directions, sds, isSurface },
			z0: nearest.point,
			sdTangent: entry(sds, 0),
			plus: plus.map(prepare),
			minus: minus.map(prepare),
			here: points.carryTo(cloud.mean)
		}
	};
}

export function findDimensionRefusal(
	task: Pick<ScaledTask, 'variableCount' | 'resultCount'>
): PlacementRefusal | null {
	const freeCount = task.variableCount - task.resultCount;
	if (freeCount < 1) return 'no-free-direction';
	return freeCount > 2 ? 'more-free-directions' : null;
}

/** How far and along which free direction a region leans off the mean. */
export interface Lean {
	/** In own SD along the direction, against it; 0: centered. */
	readonly size: number;
	/** 0: the free direction along which the cloud is widest. */
	readonly axis: number;
}

/** Center of a region that leans. */
export function computeLeaningCenter(ground: PlacementGround, { size, axis }: Lean): number[] {
	const direction = row(ground.directions, axis);
	return subtract(ground.cloud.mean, scale(direction, size * entry(ground.sds, axis)));
}

/** Squared length of u − v. */
export function squaredDistance(u: readonly number[], v: readonly number[]): number {
	const difference = subtract(u, v);
	return dot(difference, difference);
}

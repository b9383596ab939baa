import { dot, quadraticForm, scale, subtract, type Matrix } from '../linear-algebra/vector.ts';
import { computeTangent, projectToManifold } from '../tasks/project-to-manifold.ts';
import type { ScaledTask } from '../tasks/scaled-task.ts';
import { traceManifold } from '../tasks/trace-manifold.ts';
import { createCloudPoints, once, type CarriedCloud, type CloudPoints } from './carried-cloud.ts';
import type { PlacementSettings } from './region-settings.ts';

/** Mean and covariance in scaled units and the trials behind them. */
export interface Cloud {
	readonly n: number;
	readonly mean: readonly number[];
	readonly cov: Matrix;
}

/** Why the engine cannot place a region at all. */
export type PlacementRefusal =
	/** Two or more free directions (d − r ≥ 2): there is no single way along the solutions. */
	| 'more-free-directions'
	/** The result is not one number. */
	| 'two-results'
	/** As many results as variables: one solution only. */
	| 'no-free-direction'
	/** No solution is found near the person's own cloud. */
	| 'no-solution-near'
	| 'singular-cloud';

export interface TracePoint {
	readonly s: number;
	readonly z: readonly number[];
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
	/** Nearest solution to the mean, tangent there and the cloud's SD along it. */
	readonly z0: readonly number[];
	readonly tangent: readonly number[];
	readonly sdTangent: number;
	readonly plus: readonly TracePoint[];
	readonly minus: readonly TracePoint[];
	/** The cloud where it is now. */
	readonly here: CarriedCloud;
}

/**
 * Traces the manifold and prepares the cloud's point set: everything that does not depend on the share.
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
	const tangent = nearest.ok ? computeTangent(task, nearest.point) : null;
	if (!nearest.ok || !tangent) return { ok: false, reason: 'no-solution-near' };
	const trace = traceManifold(task, nearest.point, {
		length: settings.lengthMax,
		step: settings.step
	});
	const prepare = ({ s, z }: { s: number; z: readonly number[] }) => ({
		s,
		z,
		w: points.whiten(z),
		carried: once(() => points.carryTo(z))
	});
	return {
		ok: true,
		ground: {
			...{ task, cloud, settings, points, tangent },
			z0: nearest.point,
			sdTangent: Math.sqrt(quadraticForm(cloud.cov, tangent)),
			plus: trace.plus.map(prepare),
			minus: trace.minus.map(prepare),
			here: points.carryTo(cloud.mean)
		}
	};
}

export function findDimensionRefusal(
	task: Pick<ScaledTask, 'variableCount' | 'resultCount'>
): PlacementRefusal | null {
	if (task.resultCount > 1) return 'two-results';
	if (task.variableCount < 2) return 'no-free-direction';
	return task.variableCount > 2 ? 'more-free-directions' : null;
}

/** Center of a region that leans `lean` own SD against the tangent. */
export function computeLeaningCenter(ground: PlacementGround, lean: number): number[] {
	return subtract(ground.cloud.mean, scale(ground.tangent, lean * ground.sdTangent));
}

/** Squared length of u − v. */
export function squaredDistance(u: readonly number[], v: readonly number[]): number {
	const difference = subtract(u, v);
	return dot(difference, difference);
}

import { splitRowSpace } from '../../linear-algebra/row-space.ts';
import type { Matrix, Vector } from '../../linear-algebra/vector.ts';
import { projectToManifold } from '../../tasks/project-to-manifold.ts';
import { createScaledTask } from '../../tasks/scaled-task.ts';
import type { Task } from '../../tasks/task.ts';
import { convertJacobian, type CoordinateSystem } from '../../variability/coordinates.ts';
import { computeCovariance, computeMeanVector } from '../../variability/moments.ts';

export type JacobianAt = { ok: true; J: number[][] } | { ok: false; reason: 'undefined-slope' };

/** Derivative of the results at a place written in a coordinate system. */
export function findJacobian(task: Task, system: CoordinateSystem, z: Vector): JacobianAt {
	const J = convertJacobian(task.jacobian(system.toUnits(z)), system, z);
	return J.every((row) => row.every(Number.isFinite))
		? { ok: true, J }
		: { ok: false, reason: 'undefined-slope' };
}

export type NearestSolution =
	{ ok: true; point: number[] } | { ok: false; reason: 'no-solution-near' };

/** The solution nearest to the trials in their own metric, in task units. */
export function findNearestSolution(task: Task, trials: Matrix): NearestSolution {
	const scaled = createScaledTask(task);
	const executions = trials.map((trial) => scaled.toScaled(trial));
	const nearest = projectToManifold({
		task: scaled,
		mean: computeMeanVector(executions),
		covariance: computeCovariance(executions)
	});
	return nearest.ok ? { ok: true, point: scaled.toUnits(nearest.point) } : nearest;
}

/** Directions of a coordinate system along which the result stays, at a place of it. */
export function findTangents(J: Matrix): readonly (readonly number[])[] {
	return splitRowSpace(J).complement;
}

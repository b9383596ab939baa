import { computeSymmetricEigen } from '../linear-algebra/symmetric-eigen.ts';
import {
	dot,
	entry,
	norm,
	quadraticForm,
	row,
	scale,
	type Matrix,
	type Vector
} from '../linear-algebra/vector.ts';
import type { Cloud } from '../perturbations/prepare-placement.ts';
import { computeFreeDirections } from '../tasks/free-directions.ts';
import { computeTangent, projectToManifold } from '../tasks/project-to-manifold.ts';
import type { ScaledTask } from '../tasks/scaled-task.ts';
import type { CloudGeometry } from './decision.ts';

/**
 * How a cloud lies to the solutions: angle of its major axis, ratio of its eigenvalues, SD along them.
 *
 * Method:  angle between the major axis and the tangent space at the nearest solution; with one tangent
 *          that is the acute angle between two lines.
 * Source:  method sheet B12; case alignment-two-finger.
 */
export function computeCloudGeometry(task: ScaledTask, { mean, cov }: Cloud): CloudGeometry {
	const { values, vectors } = computeSymmetricEigen(cov);
	const last = values.length - 1;
	const eigenvalueRatio = entry(values, last) / entry(values, 0);
	const nearest = projectToManifold({ task, mean, covariance: cov });
	if (!nearest.ok || task.variableCount <= task.resultCount)
		return { alignmentDeg: null, eigenvalueRatio, sdTangent: null };
	if (task.resultCount > 1)
		return describeSeveral({
			task,
			cov,
			place: nearest.point,
			axis: row(vectors, last),
			eigenvalueRatio
		});
	const slope = task.gradient(nearest.point);
	const normal = scale(slope, 1 / norm(slope));
	const across = dot(row(vectors, last), normal);
	const along = Math.sqrt(Math.max(0, 1 - across * across));
	const tangent = computeTangent(task, nearest.point);
	return {
		alignmentDeg: (Math.atan2(Math.abs(across), along) * 180) / Math.PI,
		eigenvalueRatio,
		sdTangent: tangent && Math.sqrt(quadraticForm(cov, tangent))
	};
}

/** Several results: the tangent space is spanned by the free directions; null where they are not clear. */
function describeSeveral(options: {
	task: ScaledTask;
	cov: Matrix;
	place: Vector;
	axis: Vector;
	eigenvalueRatio: number;
}): CloudGeometry {
	const { task, cov, axis, eigenvalueRatio } = options;
	const directions = computeFreeDirections(task, options.place);
	if (!directions) return { alignmentDeg: null, eigenvalueRatio, sdTangent: null };
	const along = Math.min(1, Math.hypot(...directions.map((direction) => dot(axis, direction))));
	const across = Math.sqrt(1 - along * along);
	const [only = [], ...others] = directions;
	return {
		alignmentDeg: (Math.atan2(across, along) * 180) / Math.PI,
		eigenvalueRatio,
		sdTangent: others.length > 0 ? null : Math.sqrt(quadraticForm(cov, only))
	};
}

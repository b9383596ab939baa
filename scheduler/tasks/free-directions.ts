import { computeNullBasis } from '../linear-algebra/null-basis.ts';
import type { Vector } from '../linear-algebra/vector.ts';
import { computeConditioning } from './conditioning.ts';
import type { ScaledTask } from './scaled-task.ts';

/**
 * Orthonormal directions in which no result changes, to first order; the tangent space of the manifold.
 *
 * Shapes:  (d − r) rows of d, scaled. Null where the results have no slope or nearly depend on each other
 *          (ratio of singular values at most 1e-3): the manifold has no clear dimension there.
 * Source:  method sheet A6 and B12.
 */
export function computeFreeDirections(
	task: Pick<ScaledTask, 'jacobian' | 'variableCount'>,
	z: Vector
): number[][] | null {
	const conditioning = computeConditioning(task, z);
	if (!conditioning || conditioning.isSingular) return null;
	return computeNullBasis(task.jacobian(z));
}

import { computeCholesky, solveLower } from '../linear-algebra/cholesky.ts';
import { dot, subtract, type Matrix, type Vector } from '../linear-algebra/vector.ts';

export type SquaredDistances =
	{ ok: true; values: number[] } | { ok: false; reason: 'singular-covariance' };

/**
 * Squared Mahalanobis distance of each execution from a center.
 *
 * Shapes:  executions (trials × d), center (d), covariance (d × d); values (trials).
 * Source:  case ellipse-faithful-chi2-95 (R mahalanobis).
 */
export function computeSquaredDistances(options: {
	executions: Matrix;
	center: Vector;
	covariance: Matrix;
}): SquaredDistances {
	const factor = computeCholesky(options.covariance);
	if (!factor.ok) return { ok: false, reason: 'singular-covariance' };
	const values = options.executions.map((execution) => {
		const whitened = solveLower(factor.lower, subtract(execution, options.center));
		return dot(whitened, whitened);
	});
	return { ok: true, values };
}

import { combineMatrices, scaleMatrix } from '../linear-algebra/matrix.ts';
import type { Matrix } from '../linear-algebra/vector.ts';

/** Weight of the earlier cloud, in degrees of freedom. */
export const PRIOR_WEIGHT = 12;

/**
 * Covariance of a block with few trials, held up by an earlier cloud of the same person.
 *
 * Method:  (ν₀·Σ_base + (n − 1)·S) / (ν₀ + n − 1), ν₀ = 12.
 * Source:  method sheet B4.
 */
export function poolWithPrior(options: {
	base: Matrix;
	sample: Matrix;
	trialCount: number;
	priorWeight?: number;
}): number[][] {
	const { base, sample, trialCount: n, priorWeight = PRIOR_WEIGHT } = options;
	return scaleMatrix(
		combineMatrices([base, sample], [priorWeight, n - 1]),
		1 / (priorWeight + n - 1)
	);
}

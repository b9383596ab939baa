import type { Matrix, Vector } from '../linear-algebra/vector.ts';
import { computeChiSquareQuantile } from '../statistics/chi-square.ts';
import { computeSquaredDistances, type SquaredDistances } from './mahalanobis.ts';

export type OutlierFlags =
	{ ok: true; isOutlier: boolean[] } | Extract<SquaredDistances, { ok: false }>;

const QUANTILE = 0.99;

/**
 * Which trials lie far outside a robust cloud. They stay in all counts and results; they may only be left
 * out of a covariance, and by name.
 *
 * Shapes:  executions (trials × d), robust center (d) and covariance (d × d).
 * Method:  squared distance above the .99 quantile of χ²(d).
 * Source:  method sheet B3 (outlier rule); estimate-mcd.test.ts.
 */
export function flagOutliers(options: {
	executions: Matrix;
	center: Vector;
	covariance: Matrix;
}): OutlierFlags {
	const distances = computeSquaredDistances(options);
	if (!distances.ok) return distances;
	const limit = computeChiSquareQuantile(QUANTILE, options.center.length);
	return { ok: true, isOutlier: distances.values.map((value) => value > limit) };
}

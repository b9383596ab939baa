import { diagonal, scaleMatrix } from '../linear-algebra/matrix.ts';
import { column, row, type Matrix } from '../linear-algebra/vector.ts';
import { computeChiSquareCdf, computeChiSquareQuantile } from '../statistics/chi-square.ts';
import { computeSquaredDistances } from './mahalanobis.ts';
import { computeCovariance, computeMeanVector, computeMedian } from './moments.ts';

export type TrimmedCloud =
	| { ok: true; mean: number[]; covariance: number[][]; kept: boolean[] }
	| { ok: false; reason: 'singular-covariance' };

/** 1.4826…: makes the median absolute deviation an SD under the normal distribution. */
export const MAD_TO_SD = 1.482602218505602;
const QUANTILE = 0.975;
const ROUNDS_MAX = 20;

/**
 * Mean and covariance that single stray trials cannot pull; says which trials were left out.
 *
 * Shapes:  executions (trials × d), trials > d; kept (trials).
 * Method:  start at medians and MADs; keep D² ≤ χ²(d, .975), recompute, with the consistency factor
 *          .975 / F_χ²(d+2)(cut) unless all are kept; to a fixed point, at most 20 rounds.
 * Source:  method sheet B3 (i); case policy-gates (outlier shares).
 */
export function trimOutliers(executions: Matrix): TrimmedCloud {
	const d = row(executions, 0).length;
	const cut = computeChiSquareQuantile(QUANTILE, d);
	const consistency = QUANTILE / computeChiSquareCdf(cut, d + 2);
	let { mean, covariance } = startFromMedians(executions, d);
	let kept: boolean[] | null = null;
	for (let round = 0; round < ROUNDS_MAX; round++) {
		const distances = computeSquaredDistances({ executions, center: mean, covariance });
		if (!distances.ok) return distances;
		const keep = distances.values.map((value) => value <= cut);
		if (kept !== null && keep.every((value, i) => value === kept?.[i])) break;
		kept = keep;
		const used = executions.filter((_, i) => keep[i]);
		if (used.length < 2) return { ok: false, reason: 'singular-covariance' };
		mean = computeMeanVector(used);
		const isAll = used.length === executions.length;
		covariance = scaleMatrix(computeCovariance(used), isAll ? 1 : consistency);
	}
	return { ok: true, mean, covariance, kept: kept ?? [] };
}

function startFromMedians(executions: Matrix, d: number) {
	const mean = Array.from({ length: d }, (_, axis) => computeMedian(column(executions, axis)));
	const spread = mean.map(
		(median, axis) => MAD_TO_SD * computeMad(column(executions, axis), median)
	);
	return { mean, covariance: diagonal(spread.map((sd) => sd ** 2)) };
}

/** Median absolute deviation from the median. */
export function computeMad(values: readonly number[], median = computeMedian(values)): number {
	return computeMedian(values.map((value) => Math.abs(value - median)));
}

import { scaleMatrix } from '../linear-algebra/matrix.ts';
import { row, type Matrix } from '../linear-algebra/vector.ts';
import { computeChiSquareQuantile } from '../statistics/chi-square.ts';
import { computeSquaredDistances } from './mahalanobis.ts';
import {
	computeConsistencyFactor,
	computeSmallSampleFactor,
	hasSmallSampleFactor
} from './mcd-factors.ts';
import { computeCovariance, computeMeanVector } from './moments.ts';
import { findMcdSubset, type McdSearch, type McdSubset } from './search-mcd-subset.ts';

export interface McdOptions extends McdSearch {
	/** Trials within this quantile of χ²(d) are kept. */
	readonly quantile?: number;
	/**
	 * Whether covariances carry the small-sample factors (default) or the consistency factor alone. With
	 * them fewer than about 2·d + 3 trials give `few-trials`.
	 */
	readonly isSmallSampleCorrected?: boolean;
}

export type McdCloud =
	| {
			ok: true;
			/** Mean and corrected covariance of the trials that are kept. */
			mean: number[];
			covariance: number[][];
			kept: boolean[];
			/** Mean and corrected covariance of the best subset. */
			rawMean: readonly number[];
			rawCovariance: number[][];
			/** Consistency and small-sample factor of each stage. */
			rawFactors: [number, number];
			factors: [number, number];
			subset: McdSubset;
	  }
	| { ok: false; reason: 'singular-covariance' | 'few-trials' };

const KEEP_QUANTILE = 0.975;

/**
 * Mean and covariance from the half of the trials that lies closest together: withstands nearly half
 * stray trials.
 *
 * Shapes:  executions (trials × d), trials >= 2·(d + 1).
 * Method:  minimum covariance determinant of h trials: all subsets when there are at most 10⁴, else
 *          C-steps from 500 seeded starts of d + 1 trials; consistency and small-sample factors; then
 *          mean and covariance of the trials within the .975 quantile of χ²(d).
 * Source:  Rousseeuw & Van Driessen 1999; method sheet B3 (ii); case mcd-hbk (R robustbase covMcd).
 * Accuracy: the same subset as R in the cases, numbers relative 1e-8.
 * @throws {RangeError} too few trials, or a subset size outside d + 1 … trials
 */
export function estimateMcd(executions: Matrix, options: McdOptions = {}): McdCloud {
	const n = executions.length;
	const d = row(executions, 0).length;
	if (n < 2 * (d + 1)) throw new RangeError('estimateMcd requires at least 2·(d + 1) trials');
	const { share = 0.5, quantile = KEEP_QUANTILE, isSmallSampleCorrected = true } = options;
	if (isSmallSampleCorrected && !hasSmallSampleFactor(n, d))
		return { ok: false, reason: 'few-trials' };
	const subset = findMcdSubset(executions, options);
	if (!subset) return { ok: false, reason: 'singular-covariance' };
	const small = (stage: 'raw' | 'reweighted') =>
		isSmallSampleCorrected
			? computeSmallSampleFactor({ trialCount: n, variableCount: d, share, stage })
			: 1;
	const consistency = computeConsistencyFactor(subset.trials.length / n, d);
	const rawFactors: [number, number] = [consistency, small('raw')];
	const rawCovariance = scaleMatrix(subset.covariance, rawFactors[0] * rawFactors[1]);
	const distances = computeSquaredDistances({
		...{ executions, center: subset.mean, covariance: rawCovariance }
	});
	if (!distances.ok) return distances;
	const cut = computeChiSquareQuantile(quantile, d);
	const kept = distances.values.map((value) => value < cut);
	const used = executions.filter((_, i) => kept[i]);
	if (used.length <= d) return { ok: false, reason: 'singular-covariance' };
	const factors: [number, number] = [
		computeConsistencyFactor(used.length / n, d),
		small('reweighted')
	];
	return {
		ok: true,
		mean: computeMeanVector(used),
		covariance: scaleMatrix(computeCovariance(used), factors[0] * factors[1]),
		...{ kept, rawMean: subset.mean, rawCovariance, rawFactors, factors, subset }
	};
}

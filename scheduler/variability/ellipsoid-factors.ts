import { computeChiSquareQuantile } from '../statistics/chi-square.ts';
import { computeFQuantile } from '../statistics/f-distribution.ts';

/** Trials n, execution variables d and probability of an ellipsoid; d < n. */
export interface FactorRequest {
	trialCount: number;
	variableCount: number;
	probability: number;
}

/**
 * c² of the ellipsoid that covers this share of a normal population whose mean and covariance are known.
 *
 * Method:  χ² quantile with d degrees of freedom.
 * Source:  method sheet B2; tests/reference/variability.test.ts.
 */
export function computeCoverageFactor(request: Omit<FactorRequest, 'trialCount'>): number {
	return computeChiSquareQuantile(request.probability, request.variableCount);
}

/**
 * c² of the ellipsoid that holds the true mean with this confidence (Hotelling).
 *
 * Method:  d(n−1) / (n(n−d)) · F(d, n−d).
 * Source:  method sheet B2; tests/reference/variability.test.ts.
 * @throws {RangeError} not more trials than variables
 */
export function computeMeanFactor(request: FactorRequest): number {
	const { trialCount: n, variableCount: d } = request;
	return ((d * (n - 1)) / (n * (n - d))) * quantile(request);
}

/**
 * c² of the ellipsoid that holds the next single trial with this probability.
 *
 * Method:  d(n−1)(n+1) / (n(n−d)) · F(d, n−d).
 * Source:  method sheet B2; case ellipsoid-factor-prediction (R qf).
 * @throws {RangeError} not more trials than variables
 */
export function computeNextTrialFactor(request: FactorRequest): number {
	return computeMeanFactor(request) * (request.trialCount + 1);
}

function quantile({ trialCount, variableCount, probability }: FactorRequest): number {
	if (!(trialCount > variableCount))
		throw new RangeError('an ellipsoid requires more trials than variables');
	return computeFQuantile(probability, variableCount, trialCount - variableCount);
}

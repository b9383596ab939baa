import { entry, row, type Matrix } from '../linear-algebra/vector.ts';
import { computeChiSquareQuantile } from '../statistics/chi-square.ts';
import { computeNormalQuantile } from '../statistics/normal.ts';
import { computeHalton } from '../statistics/halton.ts';
import { computeNormalPoints } from '../statistics/r-sequence.ts';

export interface ToleranceRequest {
	trialCount: number;
	variableCount: number;
	/** Share β of the population that the ellipsoid must hold. */
	share: number;
	/** Confidence γ with which it holds that share. */
	confidence: number;
	/** Samples drawn and points per sample; more is slower and more exact. */
	sampleCount?: number;
	pointCount?: number;
}

/**
 * c² of the ellipsoid around the sample mean that holds at least a share of a normal population, with
 * confidence.
 *
 * Method:  quasi-Monte Carlo, no random numbers: means and covariances of samples are spread evenly over
 *          their distribution (Halton points; Bartlett decomposition), the c² that holds the share is found
 *          for each on a fixed set of normal points, and its confidence quantile is taken.
 * Source:  method sheet B2; case ellipsoid-factor-tolerance (Monte Carlo in R, 3 %).
 * Accuracy: 3 % with the default counts, tests/reference/variability.test.ts.
 * @throws {RangeError} not more trials than variables
 */
export function computeToleranceFactor(request: ToleranceRequest): number {
	const { trialCount, variableCount: d, sampleCount = 3000, pointCount = 1000 } = request;
	if (!(trialCount > d))
		throw new RangeError('a tolerance ellipsoid requires more trials than variables');
	const points = computeNormalPoints(pointCount, d);
	const distances = new Float64Array(pointCount);
	const factors = computeHalton(sampleCount, d + (d * (d + 1)) / 2).map((place) =>
		findFactorOfSample(drawSample(place, trialCount, d), points, request.share, distances)
	);
	return pickQuantile(Float64Array.from(factors), request.confidence);
}

interface Sample {
	readonly mean: readonly number[];
	/** Lower triangular factor of the sample covariance. */
	readonly lower: Matrix;
}

/** The sample mean and covariance that belong to a place of the unit cube. */
function drawSample(place: readonly number[], n: number, d: number): Sample {
	const mean = place.slice(0, d).map((p) => computeNormalQuantile(p) / Math.sqrt(n));
	let next = d;
	const lower = Array.from({ length: d }, (_row, i) =>
		Array.from({ length: d }, (_column, j) => {
			if (j > i) return 0;
			const p = entry(place, next++);
			const value =
				j === i ? Math.sqrt(computeChiSquareQuantile(p, n - 1 - i)) : computeNormalQuantile(p);
			return value / Math.sqrt(n - 1);
		})
	);
	return { mean, lower };
}

/** c² with which this sample's ellipsoid holds the share; distances: room for one number a point. */
function findFactorOfSample(
	{ mean, lower }: Sample,
	points: Matrix,
	share: number,
	distances: Float64Array
): number {
	const whitened = mean.map(() => 0);
	points.forEach((point, k) => {
		let square = 0;
		for (let i = 0; i < whitened.length; i++) {
			const line = row(lower, i);
			let rest = entry(point, i) - entry(mean, i);
			for (let j = 0; j < i; j++) rest -= entry(line, j) * entry(whitened, j);
			const value = rest / entry(line, i);
			whitened[i] = value;
			square += value * value;
		}
		distances[k] = square;
	});
	return pickQuantile(distances, share);
}

/** Quantile by straight lines between the ordered values (R type 7). */
function pickQuantile(values: Float64Array, probability: number): number {
	const sorted = values.sort();
	const place = (sorted.length - 1) * probability;
	const below = Math.floor(place);
	const low = sorted[below];
	if (low === undefined) throw new RangeError('a quantile requires at least one value');
	const high = sorted[below + 1] ?? low;
	return low + (place - below) * (high - low);
}

import { computeNormalQuantile } from './normal.ts';

/** Counts and confidence level of a share. */
export type ShareArguments = {
	successCount: number;
	trialCount: number;
	/** Confidence level, strictly between 0 and 1, for instance 0.95. */
	level: number;
};

/**
 * Two-sided confidence interval of a share, good also for few trials and shares of 0 or 1.
 *
 * Shapes: counts in, { lower, upper } out. Units: shares 0 to 1.
 * Method: inversion of the score test, no continuity correction.
 * Source: E. B. Wilson, JASA 22 (1927); R prop.test(correct = FALSE).
 * Accuracy: relative 1e-13; tests/reference/distributions.test.ts, case binomial-intervals.
 * @throws RangeError when counts do not fit together or the level is not between 0 and 1
 * @example computeWilsonInterval({ successCount: 17, trialCount: 24, level: 0.95 })
 * // { lower: 0.508323, upper: 0.850854 }
 */
export function computeWilsonInterval(options: ShareArguments): { lower: number; upper: number } {
	requireArguments(options);
	return computeBounds(options, computeNormalQuantile((1 + options.level) / 2));
}

/**
 * One-sided lower confidence bound of a share.
 *
 * Shapes: counts in, number out. Units: share 0 to 1.
 * Method and source: see {@link computeWilsonInterval}, with the one-sided normal quantile.
 * Accuracy: relative 1e-13; tests/reference/distributions.test.ts.
 * @throws RangeError when counts do not fit together or the level is not between 0 and 1
 * @example computeWilsonLowerBound({ successCount: 17, trialCount: 24, level: 0.95 }) // 0.5408
 */
export function computeWilsonLowerBound(options: ShareArguments): number {
	requireArguments(options);
	return computeBounds(options, computeNormalQuantile(options.level)).lower;
}

/**
 * One-sided upper confidence bound of a share; the mirror of {@link computeWilsonLowerBound}.
 *
 * Shapes: counts in, number out. Units: share 0 to 1.
 * Method and source: see {@link computeWilsonInterval}, with the one-sided normal quantile.
 * Accuracy: relative 1e-13; tests/reference/distributions.test.ts.
 * @throws RangeError when counts do not fit together or the level is not between 0 and 1
 * @example computeWilsonUpperBound({ successCount: 17, trialCount: 24, level: 0.95 }) // 0.8336
 */
export function computeWilsonUpperBound(options: ShareArguments): number {
	requireArguments(options);
	return computeBounds(options, computeNormalQuantile(options.level)).upper;
}

function computeBounds({ successCount, trialCount }: ShareArguments, z: number) {
	const failureCount = trialCount - successCount;
	const square = z * z;
	const middle = successCount + square / 2;
	const spread = z * Math.sqrt((successCount * failureCount) / trialCount + square / 4);
	const total = trialCount + square;
	return {
		lower: successCount === 0 && z > 0 ? 0 : (middle - spread) / total,
		upper: failureCount === 0 && z > 0 ? 1 : (middle + spread) / total
	};
}

function requireArguments({ successCount, trialCount, level }: ShareArguments): void {
	if (!(trialCount > 0)) throw new RangeError(`trialCount must be positive, got ${trialCount}`);
	if (!(successCount >= 0 && successCount <= trialCount)) {
		throw new RangeError(`successCount must lie in 0 to ${trialCount}, got ${successCount}`);
	}
	if (!(level > 0 && level < 1))
		throw new RangeError(`level must be between 0 and 1, got ${level}`);
}

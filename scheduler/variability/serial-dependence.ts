import { dot, entry, type Vector } from '../linear-algebra/vector.ts';
import { computeMad, MAD_TO_SD } from './trim-outliers.ts';
import { computeMean } from './moments.ts';

/** Highest lag-1 correlation that is believed of one block. */
const LAG_ONE_MAX = 0.6;

/**
 * A series less its mean and its straight-line trend over the trials.
 *
 * Method:  least squares on the trial number. Source: method sheet D4.
 */
export function removeTrend(series: Vector): number[] {
	const time = series.map((_, i) => i - (series.length - 1) / 2);
	const mean = computeMean(series);
	const centered = series.map((value) => value - mean);
	const slope = dot(time, centered) / dot(time, time);
	return centered.map((value, i) => value - slope * entry(time, i));
}

/**
 * Lag-1 correlation of trials: mean over series of the detrended correlation, + 1/n for its bias,
 * kept within 0 … 0.6.
 *
 * Shapes:  series: one list a variable, all of length n >= 3.
 * Source:  method sheet D0 (Settled).
 */
export function estimateLagOne(series: readonly Vector[]): number {
	const correlations = series.map(removeTrend).flatMap((rest) => {
		const power = dot(rest, rest);
		return power > 0 ? [dot(rest.slice(1), rest.slice(0, -1)) / power] : [];
	});
	if (correlations.length === 0) return 0;
	const trialCount = series[0]?.length ?? 1;
	return Math.min(LAG_ONE_MAX, Math.max(0, computeMean(correlations) + 1 / trialCount));
}

const EFFECTIVE_MIN = 3;

/**
 * Independent trials that tell as much of a mean as n trials with this lag-1 correlation; at least 3.
 *
 * Method:  n·(1 − r) / (1 + r); a correlation below 0 counts as none.
 * Source:  method sheet B1. Accuracy: coverage of the mean ellipsoid in scheduler/CALIBRATION.md.
 */
export function computeEffectiveCount(trialCount: number, lagOne: number): number {
	const r = Math.min(Math.max(lagOne, 0), 1);
	return Math.min(trialCount, Math.max(EFFECTIVE_MIN, (trialCount * (1 - r)) / (1 + r)));
}

/** SD of a detrended series that single stray trials cannot pull: 1.4826 · MAD. */
export function estimateRobustSd(series: Vector): number {
	return MAD_TO_SD * computeMad(removeTrend(series));
}

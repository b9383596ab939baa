import { computeNormalQuantile } from '../statistics/normal.ts';
import { requireTest } from './t-power.ts';
import { findSmallestN } from './smallest-n.ts';
import { computeTwoSampleTPower } from './two-sample-t.ts';

export type ReestimationOptions = {
	/** Outcomes of all people so far, without their groups. */
	pooledValues: readonly number[];
	/** Difference of the means that the study is planned for, in the units of the values. */
	difference: number;
	alpha: number;
	/** Two when left out. */
	sides?: 1 | 2;
	power: number;
	/** People per group in the plan; the new number never falls below it. None when left out. */
	plannedPerGroup?: number;
};

export type Reestimation =
	| {
			ok: true;
			/** Variance of all values about their common mean. */
			pooledVariance: number;
			/** The same less what the planned difference adds; 0 when that is more. */
			adjustedVariance: number;
			/** People per group by the normal formula, from either variance, and by the t test. */
			perGroupNormal: number;
			perGroupNormalAdjusted: number;
			perGroupT: number;
			/** perGroupT, or the plan if that is more. */
			perGroup: number;
	  }
	| { ok: false; reason: 'too-few-values' | 'no-variance' | 'beyond-limit' };

/** Larger effects need two people a group as well; their noncentrality would take very long. */
const EFFECT_MAX = 100;

/**
 * Group sizes from the spread seen halfway, without looking at the groups.
 *
 * Shapes: list of values in, group sizes out. Units: those of the values; people per group.
 * Method: one-sample variance S² of the pooled values; adjusted S² - N Δ² / (4 (N - 1)); n = 2 (z_α +
 * z_β)² S² / Δ², and the t test's n with S. The type I error of the final t test is left intact.
 * Source: M. Kieser and T. Friede, Stat Med 22 (2003); method sheet E.
 * Accuracy: relative 1e-10 of variances, counts exact; tests/reference/power-sheet.test.ts, case
 * blinded-ssr.
 * @throws RangeError when the difference is 0, power is not between alpha and 1, or alpha is out of
 * range
 */
export function reestimateBlinded(options: ReestimationOptions): Reestimation {
	const { pooledValues, difference, alpha, sides = 2, power, plannedPerGroup = 0 } = options;
	requireTest(alpha, sides);
	if (!(Number.isFinite(difference) && difference !== 0))
		throw new RangeError(`difference must not be 0, got ${difference}`);
	if (!(power > alpha && power < 1))
		throw new RangeError(`power must lie between alpha ${alpha} and 1, got ${power}`);
	const n = pooledValues.length;
	if (n < 3) return { ok: false, reason: 'too-few-values' };
	const pooledVariance = computeVariance(pooledValues);
	if (!(pooledVariance > 0)) return { ok: false, reason: 'no-variance' };
	const surplus = (n * difference * difference) / (4 * (n - 1));
	const adjustedVariance = Math.max(0, pooledVariance - surplus);
	const z = computeNormalQuantile(alpha / sides) + computeNormalQuantile(1 - power);
	const count = (variance: number) =>
		Math.max(2, Math.ceil((2 * z * z * variance) / (difference * difference) - 1e-9));
	const effectSize = Math.min(EFFECT_MAX, Math.abs(difference) / Math.sqrt(pooledVariance));
	const found = findSmallestN({
		computePower: (m) => computeTwoSampleTPower({ effectSize, n1: m, n2: m, alpha, sides }),
		power,
		smallest: 2
	});
	if (!found.ok) return { ok: false, reason: 'beyond-limit' };
	return {
		ok: true,
		pooledVariance,
		adjustedVariance,
		perGroupNormal: count(pooledVariance),
		perGroupNormalAdjusted: count(adjustedVariance),
		perGroupT: found.n,
		perGroup: Math.max(found.n, plannedPerGroup)
	};
}

function computeVariance(values: readonly number[]): number {
	const mean = values.reduce((sum, value) => sum + value, 0) / values.length;
	return values.reduce((sum, value) => sum + (value - mean) ** 2, 0) / (values.length - 1);
}

import { computeFUpperQuantile } from '../statistics/f-distribution.ts';
import { computeNoncentralFTails } from '../statistics/noncentral-f.ts';
import { requireCount, requireTest } from './t-power.ts';

/**
 * Power of an F test.
 *
 * Shapes: numbers in, number out. Units: none.
 * Method: upper tail of the noncentral F beyond the critical value. Source: method sheet E.
 * Accuracy: absolute 1e-10; tests/reference/power-sheet.test.ts, case power-anova-f.
 * @throws RangeError when a df is not positive, ncp is negative or alpha is out of range
 */
export function computeFPower(test: {
	ncp: number;
	df1: number;
	df2: number;
	alpha: number;
}): number {
	const { ncp, df1, df2, alpha } = test;
	requireTest(alpha, 2);
	if (!(ncp >= 0)) throw new RangeError(`ncp must not be negative, got ${ncp}`);
	if (ncp > 1e6) return 1;
	const critical = computeFUpperQuantile(alpha, df1, df2);
	return computeNoncentralFTails(critical, { df1, df2, ncp }).upper;
}

/**
 * Power of the one-way analysis of variance between groups.
 *
 * Shapes: numbers in, number out. Units: f is the deviation of the group means (weighted by group
 * sizes) in standard deviations within groups.
 * Method: noncentrality N f², k - 1 and N - k degrees of freedom. Source: method sheet E; R package
 * pwr, pwr.anova.test.
 * Accuracy: absolute 1e-10; tests/reference/power-sheet.test.ts, case power-anova-f.
 * @throws RangeError when there are fewer than two groups or too few people
 * @example computeAnovaPower({ groupCount: 3, totalN: 60, f: 0.25, alpha: 0.05 }) // 0.3744
 */
export function computeAnovaPower(design: {
	groupCount: number;
	totalN: number;
	f: number;
	alpha: number;
}): number {
	const { groupCount, totalN, f, alpha } = design;
	requireCount('groupCount', groupCount, 2);
	if (!(totalN > groupCount)) throw new RangeError(`totalN must exceed ${groupCount}`);
	return computeFPower({
		ncp: totalN * f * f,
		df1: groupCount - 1,
		df2: totalN - groupCount,
		alpha
	});
}

/** A design with groups between people and repeated measurements within them. */
export type MixedAnovaDesign = {
	groupCount: number;
	/** Measurements of each person. */
	measurementCount: number;
	/** People in all groups together. */
	totalN: number;
	/** Correlation between two measurements of a person. */
	correlation: number;
	/** Greenhouse-Geisser epsilon; 1 when left out. */
	epsilon?: number;
	alpha: number;
	/** Deviation of the effect's means in standard deviations of one measurement. */
	f: number;
	effect: 'between' | 'within' | 'interaction';
};

/**
 * Power of one effect of a mixed analysis of variance.
 *
 * Shapes: numbers in, number out. Units: f in standard deviations of one measurement.
 * Method: between: noncentrality N m f² / (1 + (m - 1) ρ), k - 1 and N - k degrees of freedom; within
 * and interaction: N m f² ε / (1 - ρ), ε (m - 1) or ε (k - 1)(m - 1), and ε (N - k)(m - 1).
 * Source: method sheet E (Monte Carlo of 20 000: .491 and .591 against .496 and .587).
 * Accuracy: absolute 1e-10 of the formula; tests/reference/power-sheet.test.ts, case
 * power-mixed-anova-mc.
 * @throws RangeError when a count, the correlation or epsilon is out of range
 */
export function computeMixedAnovaPower(design: MixedAnovaDesign): number {
	requireMixed(design);
	const { groupCount: k, measurementCount: m, totalN: n, correlation: rho, alpha } = design;
	const { f, effect, epsilon = 1 } = design;
	const size = n * m * f * f;
	if (effect === 'between')
		return computeFPower({ ncp: size / (1 + (m - 1) * rho), df1: k - 1, df2: n - k, alpha });
	const df = epsilon * (m - 1);
	const df1 = effect === 'within' ? df : df * (k - 1);
	return computeFPower({ ncp: (size * epsilon) / (1 - rho), df1, df2: df * (n - k), alpha });
}

function requireMixed(design: MixedAnovaDesign): void {
	const { groupCount, measurementCount, totalN, correlation, effect, epsilon = 1 } = design;
	requireCount('groupCount', groupCount, effect === 'within' ? 1 : 2);
	requireCount('measurementCount', measurementCount, 2);
	if (!(totalN > groupCount)) throw new RangeError(`totalN must exceed ${groupCount}`);
	const lowest = -1 / (measurementCount - 1);
	if (!(correlation > lowest && correlation < 1))
		throw new RangeError(`correlation must lie between ${lowest} and 1, got ${correlation}`);
	if (!(epsilon >= 1 / (measurementCount - 1) - 1e-12 && epsilon <= 1))
		throw new RangeError(`epsilon must lie in 1 / (measurements - 1) to 1, got ${epsilon}`);
}

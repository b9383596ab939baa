import { computeNoncentralTTails } from '../statistics/noncentral-t.ts';
import { computeStudentTQuantile } from '../statistics/student-t.ts';

/** Any test whose statistic is noncentral t. */
export type TTest = {
	/** Expected difference in its standard errors. */
	ncp: number;
	/** Degrees of freedom, any positive real. */
	df: number;
	alpha: number;
	/** 2: a difference either way. 1: only above zero. */
	sides: 1 | 2;
	/** Two-sided: whether a result the wrong way counts as well. True when left out. */
	strict?: boolean;
};

/** Beyond this the noncentral t is all but a point far outside the critical values. */
const NCP_MAX = 1e4;

/**
 * Power of a test whose statistic is noncentral t.
 *
 * Shapes: numbers in, number out. Units: none.
 * Method: both tails of the noncentral t beyond the critical values (with `strict: false` only the
 * one on the side of the difference, as some programs do).
 * Source: method sheet E; R power.t.test. jstat's noncentral t is good to 3e-8 only.
 * Accuracy: absolute 1e-10; tests/reference/power-sheet.test.ts.
 * @throws RangeError when df is not positive, or alpha or sides are out of range
 * @example computeTPower({ ncp: 2, df: 20, alpha: 0.05, sides: 2 }) // 0.478
 */
export function computeTPower({ ncp, df, alpha, sides, strict = true }: TTest): number {
	requireTest(alpha, sides);
	if (!Number.isFinite(ncp)) throw new RangeError(`ncp must be a number, got ${ncp}`);
	const critical = -computeStudentTQuantile(alpha / sides, df);
	if (Math.abs(ncp) > NCP_MAX) return sides === 2 || ncp > 0 ? 1 : 0;
	if (sides === 1) return computeNoncentralTTails(critical, { df, ncp }).upper;
	const right = computeNoncentralTTails(critical, { df, ncp: Math.abs(ncp) }).upper;
	if (!strict) return right;
	return Math.min(1, right + computeNoncentralTTails(-critical, { df, ncp: Math.abs(ncp) }).lower);
}

/**
 * Power of the t test of one mean, or of the mean of paired differences.
 *
 * Shapes: numbers in, number out. Units: effect in standard deviations of the values (paired: of the
 * differences), n people or pairs.
 * Method and source: see {@link computeTPower}, noncentrality d √n, n - 1 degrees of freedom.
 * Accuracy: absolute 1e-10; tests/reference/power-sheet.test.ts, case n-t-paired.
 * @throws RangeError when there are fewer than two people
 * @example computeOneSampleTPower({ effectSize: 0.5, n: 34, alpha: 0.05, sides: 2 }) // 0.808
 */
export function computeOneSampleTPower(design: {
	effectSize: number;
	n: number;
	alpha: number;
	sides: 1 | 2;
	strict?: boolean;
}): number {
	const { effectSize, n, ...test } = design;
	requireCount('n', n, 2);
	return computeTPower({ ...test, ncp: effectSize * Math.sqrt(n), df: n - 1 });
}

/**
 * Standard deviation of paired differences.
 *
 * Shapes: numbers in, number out. Units: those of the values.
 * Method: σ² = σ₁² + σ₂² - 2 ρ σ₁ σ₂. Source: method sheet E. Accuracy: exact;
 * scheduler/power/power.test.ts.
 * @throws RangeError when a deviation is negative or the correlation is not in -1 to 1
 * @example computeDifferenceSd({ sd1: 1, sd2: 1, correlation: 0.5 }) // 1
 */
export function computeDifferenceSd(pair: {
	sd1: number;
	sd2: number;
	correlation: number;
}): number {
	const { sd1, sd2, correlation } = pair;
	if (!(sd1 >= 0 && sd2 >= 0)) throw new RangeError(`deviations below 0: ${sd1}, ${sd2}`);
	if (!(Math.abs(correlation) <= 1))
		throw new RangeError(`correlation must lie in -1 to 1, got ${correlation}`);
	return Math.sqrt(Math.max(0, sd1 * sd1 + sd2 * sd2 - 2 * correlation * sd1 * sd2));
}

/**
 * Power of the comparison of two groups adjusted for covariates (ANCOVA).
 *
 * Shapes: numbers in, number out. Units: effect in standard deviations before adjustment.
 * Method: the error variance shrinks to 1 - ρ², one degree of freedom is spent on each covariate.
 * Source: method sheet E. Accuracy: absolute 1e-10; tests/reference/power-sheet.test.ts.
 * @throws RangeError when a group has fewer than two people or the correlation is not above -1 and
 * below 1
 * @example computeAncovaPower({ effectSize: 0.5, n1: 30, n2: 30, correlation: 0.6,
 *   alpha: 0.05, sides: 2 }) // 0.657
 */
export function computeAncovaPower(design: {
	effectSize: number;
	n1: number;
	n2: number;
	/** Correlation of outcome and covariates (multiple correlation when there are several). */
	correlation: number;
	/** 1 when left out. */
	covariateCount?: number;
	alpha: number;
	sides: 1 | 2;
	strict?: boolean;
}): number {
	const { effectSize, n1, n2, correlation, covariateCount = 1, ...test } = design;
	requireCount('n1', n1, 2);
	requireCount('n2', n2, 2);
	if (!(Math.abs(correlation) < 1))
		throw new RangeError(`correlation must lie between -1 and 1, got ${correlation}`);
	const adjusted = effectSize / Math.sqrt(1 - correlation * correlation);
	const ncp = adjusted * Math.sqrt((n1 * n2) / (n1 + n2));
	return computeTPower({ ...test, ncp, df: n1 + n2 - 2 - covariateCount });
}

/**
 * Power of the comparison of two groups' mean slopes, one slope for each person.
 *
 * Shapes: measuring times and numbers in, number out. Units: slopes in outcome units per time unit.
 * Method: t test on the slopes, whose variance is σ_b² + σ² / S_xx; n1 + n2 - 2 degrees of freedom.
 * Source: method sheet E. Accuracy: absolute 1e-10; tests/reference/power-sheet.test.ts.
 * @throws RangeError when all times are equal, a group has fewer than two people or a deviation is
 * negative
 */
export function computeSlopePower(design: {
	slopeDifference: number;
	n1: number;
	n2: number;
	/** When each person is measured; or their sum of squares about the mean. */
	times: readonly number[] | { sumOfSquares: number };
	/** Deviation of true slopes between people. */
	slopeSd: number;
	/** Deviation of one measurement from its person's line. */
	residualSd: number;
	alpha: number;
	sides: 1 | 2;
	strict?: boolean;
}): number {
	const { slopeDifference, n1, n2, times, slopeSd, residualSd, ...test } = design;
	requireCount('n1', n1, 2);
	requireCount('n2', n2, 2);
	if (!(slopeSd >= 0 && residualSd >= 0 && slopeSd + residualSd > 0))
		throw new RangeError(`deviations must be positive: ${slopeSd}, ${residualSd}`);
	const square = 'sumOfSquares' in times ? times.sumOfSquares : sumSquares(times);
	if (!(square > 0)) throw new RangeError('the times must differ');
	const variance = slopeSd * slopeSd + (residualSd * residualSd) / square;
	const ncp = slopeDifference / Math.sqrt(variance * (1 / n1 + 1 / n2));
	return computeTPower({ ...test, ncp, df: n1 + n2 - 2 });
}

function sumSquares(times: readonly number[]): number {
	const mean = times.reduce((sum, t) => sum + t, 0) / times.length;
	return times.reduce((sum, t) => sum + (t - mean) ** 2, 0);
}

/** Throws unless alpha and sides can be. */
export function requireTest(alpha: number, sides: number): void {
	if (!(alpha > 0 && alpha < 1)) throw new RangeError(`alpha must be in 0 to 1, got ${alpha}`);
	if (sides !== 1 && sides !== 2) throw new RangeError(`sides must be 1 or 2, got ${sides}`);
}

/** Throws unless a count (whole or expected) is finite and large enough. */
export function requireCount(name: string, value: number, least: number): void {
	if (!(value >= least && value < Infinity))
		throw new RangeError(`${name} must be at least ${least}, got ${value}`);
}

import { computeLogGamma } from '../statistics/log-gamma.ts';
import { computeNoncentralTTails } from '../statistics/noncentral-t.ts';
import { integrateReals } from '../statistics/quadrature.ts';
import { computeStudentTQuantile } from '../statistics/student-t.ts';
import { computeTPower, requireCount, requireTest } from './t-power.ts';

/** A comparison of two groups with variances of their own. */
export type WelchDesign = {
	/** Expected difference of the means, in the units of the deviations. */
	difference: number;
	sd1: number;
	sd2: number;
	n1: number;
	n2: number;
	alpha: number;
	sides: 1 | 2;
};

/**
 * Exact power of Welch's t test.
 *
 * Shapes: numbers in, number out. Units: difference and deviations alike.
 * Method: given what share of the pooled chi-square belongs to group 1, Welch's critical value is
 * fixed and the statistic is noncentral t with n1 + n2 - 2 degrees of freedom; the power is the
 * average over the beta distribution of that share, by the trapezoidal rule on its log odds.
 * Source: method sheet E (quadrature over both variances), reduced to one integral.
 * Accuracy: absolute 1e-9; tests/reference/power-sheet.test.ts, case power-welch-a.
 * @throws RangeError when a group has fewer than two people or a deviation is not positive
 * @example computeWelchPower({ difference: 1.2, sd1: 1, sd2: 2, n1: 15, n2: 25, alpha: 0.05,
 *   sides: 2 }) // 0.68875
 */
export function computeWelchPower(design: WelchDesign): number {
	requireDesign(design);
	const { n1, n2 } = design;
	const [a, b] = [(n1 - 1) / 2, (n2 - 1) / 2];
	const logScale = computeLogGamma(a + b) - computeLogGamma(a) - computeLogGamma(b);
	const centre = Math.log(a / b);
	const power = integrateReals(
		(y) => {
			const [logShare, logRest] = [-Math.log1p(Math.exp(-y)), -Math.log1p(Math.exp(y))];
			const density = Math.exp(logScale + a * logShare + b * logRest);
			return density < 1e-25 ? 0 : density * computeGivenShare(design, Math.exp(logShare));
		},
		{ centre, step: 0.6 * Math.sqrt(1 / a + 1 / b) }
	);
	return Math.min(1, power);
}

/**
 * The usual approximation: noncentral t with the Satterthwaite degrees of freedom of the true
 * variances. Differs from {@link computeWelchPower} by up to .001 in the cases of method sheet E.
 * @throws RangeError when a group has fewer than two people or a deviation is not positive
 */
export function approximateWelchPower(design: WelchDesign): { power: number; df: number } {
	requireDesign(design);
	const { difference, sd1, sd2, n1, n2, alpha, sides } = design;
	const [v1, v2] = [sd1 ** 2 / n1, sd2 ** 2 / n2];
	const df = (v1 + v2) ** 2 / (v1 ** 2 / (n1 - 1) + v2 ** 2 / (n2 - 1));
	return { power: computeTPower({ ncp: difference / Math.sqrt(v1 + v2), df, alpha, sides }), df };
}

function computeGivenShare(design: WelchDesign, share: number): number {
	const { difference, sd1, sd2, n1, n2, alpha, sides } = design;
	const [df1, df2] = [n1 - 1, n2 - 1];
	// Estimated variances of both means, divided by the pooled chi-square.
	const [e1, e2] = [(sd1 ** 2 / (n1 * df1)) * share, (sd2 ** 2 / (n2 * df2)) * (1 - share)];
	const welchDf = (e1 + e2) ** 2 / (e1 ** 2 / df1 + e2 ** 2 / df2);
	const trueSe = Math.sqrt(sd1 ** 2 / n1 + sd2 ** 2 / n2);
	const df = df1 + df2;
	const critical = -computeStudentTQuantile(alpha / sides, welchDf);
	const limit = (critical * Math.sqrt((e1 + e2) * df)) / trueSe;
	const ncp = Math.min(1e4, Math.max(-1e4, difference / trueSe));
	const above = computeNoncentralTTails(limit, { df, ncp }).upper;
	return sides === 1 ? above : above + computeNoncentralTTails(-limit, { df, ncp }).lower;
}

function requireDesign({ difference, sd1, sd2, n1, n2, alpha, sides }: WelchDesign): void {
	requireTest(alpha, sides);
	requireCount('n1', n1, 2);
	requireCount('n2', n2, 2);
	if (!Number.isFinite(difference))
		throw new RangeError(`difference must be a number, got ${difference}`);
	if (!(sd1 > 0 && sd2 > 0 && sd1 < Infinity && sd2 < Infinity))
		throw new RangeError(`sd1 and sd2 must be positive, got ${sd1} and ${sd2}`);
}

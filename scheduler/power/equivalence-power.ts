import { computeNormalCdf } from '../statistics/normal.ts';
import { integrate } from '../statistics/quadrature.ts';
import { computePoissonWeight } from '../statistics/saddle-point.ts';
import { computeStudentTQuantile } from '../statistics/student-t.ts';
import { requireCount, requireTest } from './t-power.ts';

/** Two one-sided tests: is the difference within the margins? */
export type EquivalenceDesign = {
	trueDifference: number;
	/** Ends of what counts as the same: below and above 0, in the units of the deviation. */
	lowerMargin: number;
	upperMargin: number;
	/** Deviation of one value; paired: of a difference. */
	sd: number;
	/** Each of the two tests is done at this level. */
	alpha: number;
} & ({ paired: false; n1: number; n2: number } | { paired: true; n: number });

/**
 * Exact power of the test of equivalence (two one-sided t tests).
 *
 * Shapes: numbers in, number out. Units: those of the deviation.
 * Method: given the estimate of the spread both tests are limits on the mean difference, so that the
 * power is one integral over that estimate; above the spread at which the limits meet nothing is
 * equivalent.
 * Source: method sheet E; D. Schuirmann, J Pharmacokinet Biopharm 15 (1987).
 * Accuracy: absolute 1e-9; tests/reference/power-sheet.test.ts, case power-tost.
 * @throws RangeError when the margins do not enclose a range, sd is not positive or n is too small
 */
export function computeEquivalencePower(design: EquivalenceDesign): number {
	const { trueDifference: delta, lowerMargin, upperMargin, sd, alpha } = design;
	requireTest(alpha, 1);
	if (!(upperMargin > lowerMargin && sd > 0 && Number.isFinite(delta)))
		throw new RangeError('the margins must enclose a range and sd must be positive');
	const { df, scale } = measure(design);
	const se = sd * scale;
	const t = -computeStudentTQuantile(alpha, df);
	const meet = (upperMargin - lowerMargin) / (2 * t * se);
	const spread = 1 / Math.sqrt(2 * df);
	const low = Math.max(1e-12, 1 - 12 * spread);
	const high = Math.min(t > 0 ? meet : Infinity, 1 + 14 * spread);
	if (high <= low) return 0;
	const density = (u: number) => (df * computePoissonWeight(df / 2, (df * u * u) / 2)) / u;
	const within = (u: number) =>
		computeNormalCdf((upperMargin - delta) / se - t * u) -
		computeNormalCdf((lowerMargin - delta) / se + t * u);
	const compute = (u: number) => density(u) * Math.max(0, within(u));
	// Limits sharper than the spread of u need finer panels.
	const panelCount = Math.min(60, 6 + Math.ceil(t * (high - low)));
	return Math.min(1, integrate(compute, { low, high, panelCount }));
}

function measure(design: EquivalenceDesign): { df: number; scale: number } {
	if (design.paired) {
		requireCount('n', design.n, 2);
		return { df: design.n - 1, scale: Math.sqrt(1 / design.n) };
	}
	requireCount('n1', design.n1, 2);
	requireCount('n2', design.n2, 2);
	const { n1, n2 } = design;
	return { df: n1 + n2 - 2, scale: Math.sqrt(1 / n1 + 1 / n2) };
}

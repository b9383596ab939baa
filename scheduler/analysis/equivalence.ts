import { computeStudentTSurvival } from '../statistics/student-t.ts';
import { testPaired, testTwoSample, testWelch, type TTestResult } from './t-tests.ts';

export type EquivalenceResult =
	| {
			ok: true;
			estimate: number;
			standardError: number;
			df: number;
			/** The test that the difference is above the lower margin, and below the upper one. */
			above: { t: number; p: number };
			below: { t: number; p: number };
			/** The larger of both. */
			p: number;
			/** Of level 1 - 2 alpha: equivalence is shown when it lies within the margins. */
			interval: { lower: number; upper: number };
			isEquivalent: boolean;
	  }
	| { ok: false; reason: 'too-few-values' | 'no-variance' };

/**
 * Test of equivalence of two means: two one-sided t tests.
 *
 * Shapes: values of both groups in, tests and interval out. Units: those of the values.
 * Method: equivalence at level alpha when both one-sided tests reject. `paired` and `pooled` use the
 * respective t test, `welch` separate variances.
 * Source: D. Schuirmann, J Pharmacokinet Biopharm 15 (1987).
 * Accuracy: relative 1e-10; tests/reference/analysis.test.ts.
 * @throws RangeError when the margins do not enclose a range, alpha is not between 0 and 0.5, or as
 * the t test does
 */
export function testEquivalence(
	first: readonly number[],
	second: readonly number[],
	options: {
		design: 'paired' | 'pooled' | 'welch';
		lowerMargin: number;
		upperMargin: number;
		alpha: number;
	}
): EquivalenceResult {
	const { design, lowerMargin, upperMargin, alpha } = options;
	if (!(upperMargin > lowerMargin)) throw new RangeError('the margins must enclose a range');
	if (!(alpha > 0 && alpha < 0.5))
		throw new RangeError(`alpha must lie between 0 and 0.5, got ${alpha}`);
	const test = { paired: testPaired, pooled: testTwoSample, welch: testWelch }[design];
	const plain: TTestResult = test(first, second, { level: 1 - 2 * alpha });
	if (!plain.ok) return plain;
	const { estimate, standardError, df, interval } = plain;
	const [t1, t2] = [lowerMargin, upperMargin].map((margin) => (estimate - margin) / standardError);
	const above = { t: t1 ?? 0, p: computeStudentTSurvival(t1 ?? 0, df) };
	const below = { t: t2 ?? 0, p: computeStudentTSurvival(-(t2 ?? 0), df) };
	const p = Math.max(above.p, below.p);
	const isEquivalent = p < alpha;
	return { ok: true, estimate, standardError, df, above, below, p, interval, isEquivalent };
}

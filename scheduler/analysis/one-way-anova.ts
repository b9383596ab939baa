import { computeFSurvival } from '../statistics/f-distribution.ts';
import { summarise, VARIANCE_MIN } from './t-tests.ts';

/** One F test. */
export type FTest = { f: number; df1: number; df2: number; p: number };

export type AnovaResult =
	| {
			ok: true;
			/** With one common variance. */
			test: FTest;
			/** With variances of their own; null when a group has fewer than two values or no spread. */
			welch: FTest | null;
			sumsOfSquares: { between: number; within: number };
			/** Share of the sum of squares between groups, and less its bias. */
			etaSquared: number;
			omegaSquared: number;
			means: number[];
			residualSd: number;
	  }
	| { ok: false; reason: 'too-few-values' | 'no-variance' };

/**
 * One-way analysis of variance.
 *
 * Shapes: values of k groups in, tests out. Units: those of the values.
 * Method: F of the mean squares; Welch's F with weights n / s².
 * Source: R aov and oneway.test; B. Welch, Biometrika 38 (1951).
 * Accuracy: relative 1e-10; tests/reference/analysis.test.ts.
 * @throws RangeError when there are fewer than two groups or a value is no number
 */
export function analyseOneWay(groups: readonly (readonly number[])[]): AnovaResult {
	if (groups.length < 2) throw new RangeError('there must be at least two groups');
	const sums = groups.map(summarise);
	const n = sums.reduce((sum, group) => sum + group.n, 0);
	const k = groups.length;
	if (sums.some((group) => group.n === 0) || n <= k) return { ok: false, reason: 'too-few-values' };
	const mean = sums.reduce((sum, group) => sum + group.n * group.mean, 0) / n;
	const between = sums.reduce((sum, group) => sum + group.n * (group.mean - mean) ** 2, 0);
	const within = sums.reduce((sum, group) => sum + group.sumOfSquares, 0);
	const square = within / (n - k);
	if (!(square > Math.max(VARIANCE_MIN, 1e-26 * between)))
		return { ok: false, reason: 'no-variance' };
	return {
		ok: true,
		test: testF(between / (k - 1) / square, k - 1, n - k),
		welch: testWelchF(groups),
		sumsOfSquares: { between, within },
		etaSquared: between / (between + within),
		omegaSquared: Math.max(0, (between - (k - 1) * square) / (between + within + square)),
		means: sums.map((group) => group.mean),
		residualSd: Math.sqrt(square)
	};
}

function testWelchF(groups: readonly (readonly number[])[]): FTest | null {
	const sums = groups.map(summarise);
	const weights = sums.map(({ n, sumOfSquares }) => (n * (n - 1)) / sumOfSquares);
	if (!weights.every((weight) => weight > 0 && weight < 1 / VARIANCE_MIN)) return null;
	const k = groups.length;
	const total = weights.reduce((sum, weight) => sum + weight, 0);
	const mean = sums.reduce((sum, group, i) => sum + (weights[i] ?? 0) * group.mean, 0) / total;
	const spread = sums.reduce(
		(sum, group, i) => sum + (weights[i] ?? 0) * (group.mean - mean) ** 2,
		0
	);
	const lambda = sums.reduce(
		(sum, { n }, i) => sum + (1 - (weights[i] ?? 0) / total) ** 2 / (n - 1),
		0
	);
	const f = spread / (k - 1) / (1 + (2 * (k - 2) * lambda) / (k * k - 1));
	return testF(f, k - 1, (k * k - 1) / (3 * lambda));
}

/** An F value with its upper tail. */
export function testF(f: number, df1: number, df2: number): FTest {
	return { f, df1, df2, p: computeFSurvival(f, df1, df2) };
}

import { computeStudentTQuantile, computeStudentTSurvival } from '../statistics/student-t.ts';

/** What is looked for. */
export type Alternative = 'two-sided' | 'greater' | 'less';

export type TTestOptions = {
	/** Difference (or mean) under no effect; 0 when left out. */
	nullValue?: number;
	/** Two-sided when left out. */
	alternative?: Alternative;
	/** Confidence of the interval, 0.95 when left out. */
	level?: number;
};

export type TTestResult =
	| {
			ok: true;
			/** Mean, mean difference, or difference of the means (first less second). */
			estimate: number;
			standardError: number;
			t: number;
			df: number;
			p: number;
			/** One-sided alternatives leave one end open: ±Infinity. */
			interval: { lower: number; upper: number };
	  }
	| { ok: false; reason: 'too-few-values' | 'no-variance' };

/** Count, mean and sum of squares about the mean. */
export type SampleSummary = { n: number; mean: number; sumOfSquares: number };

/** Smaller ones have lost their digits. */
export const VARIANCE_MIN = 1e-290;

/**
 * Student's t test of one mean.
 *
 * Shapes: values in, test and interval out. Units: those of the values.
 * Method: t with n - 1 degrees of freedom. Source: Student 1908; R t.test. jstat's and
 * simple-statistics' tests give no interval, and lose small p values.
 * Accuracy: relative 1e-10; tests/reference/analysis.test.ts.
 * @throws RangeError when a value is no number or the level is not between 0 and 1
 */
export function testOneSample(values: readonly number[], options: TTestOptions = {}): TTestResult {
	const { n, mean, sumOfSquares } = summarise(values);
	if (n < 2) return { ok: false, reason: 'too-few-values' };
	return finish({ estimate: mean, variance: sumOfSquares / (n - 1) / n, df: n - 1 }, options);
}

/**
 * Student's t test of paired differences (first less second).
 * @throws RangeError when the lists differ in length, and as {@link testOneSample} does
 */
export function testPaired(
	first: readonly number[],
	second: readonly number[],
	options: TTestOptions = {}
): TTestResult {
	if (first.length !== second.length)
		throw new RangeError(
			`pairs need lists of one length, got ${first.length} and ${second.length}`
		);
	const differences = first.map((value, i) => value - (second[i] ?? Number.NaN));
	return testOneSample(differences, options);
}

/**
 * t test of two independent groups with one common variance.
 *
 * Shapes: values of both groups in, test and interval out. Units: those of the values.
 * Method: pooled variance, n1 + n2 - 2 degrees of freedom. Source: R t.test(var.equal = TRUE).
 * Accuracy: relative 1e-10; tests/reference/analysis.test.ts.
 * @throws RangeError as {@link testOneSample} does
 */
export function testTwoSample(
	first: readonly number[],
	second: readonly number[],
	options: TTestOptions = {}
): TTestResult {
	const [a, b] = [summarise(first), summarise(second)];
	const df = a.n + b.n - 2;
	if (a.n < 1 || b.n < 1 || df < 1) return { ok: false, reason: 'too-few-values' };
	const pooled = (a.sumOfSquares + b.sumOfSquares) / df;
	return finish({ estimate: a.mean - b.mean, variance: pooled * (1 / a.n + 1 / b.n), df }, options);
}

/**
 * Welch's t test: two independent groups with variances of their own.
 *
 * Shapes: values of both groups in, test and interval out. Units: those of the values.
 * Method: separate variances, Satterthwaite's degrees of freedom. Source: B. Welch, Biometrika 34
 * (1947); R t.test.
 * Accuracy: relative 1e-10; tests/reference/analysis.test.ts, case t-tests-sleep.
 * @throws RangeError as {@link testOneSample} does
 */
export function testWelch(
	first: readonly number[],
	second: readonly number[],
	options: TTestOptions = {}
): TTestResult {
	const [a, b] = [summarise(first), summarise(second)];
	if (a.n < 2 || b.n < 2) return { ok: false, reason: 'too-few-values' };
	const [va, vb] = [a.sumOfSquares / (a.n - 1) / a.n, b.sumOfSquares / (b.n - 1) / b.n];
	const variance = va + vb;
	if (!(variance > VARIANCE_MIN)) return { ok: false, reason: 'no-variance' };
	const share = va / variance;
	const df = 1 / (share ** 2 / (a.n - 1) + (1 - share) ** 2 / (b.n - 1));
	return finish({ estimate: a.mean - b.mean, variance, df }, options);
}

function finish(
	{ estimate, variance, df }: { estimate: number; variance: number; df: number },
	{ nullValue = 0, alternative = 'two-sided', level = 0.95 }: TTestOptions
): TTestResult {
	if (!(level > 0 && level < 1))
		throw new RangeError(`level must be between 0 and 1, got ${level}`);
	const standardError = Math.sqrt(variance);
	// What is left of rounding is no spread.
	if (!(variance > VARIANCE_MIN && standardError > 1e-14 * Math.abs(estimate)))
		return { ok: false, reason: 'no-variance' };
	const t = (estimate - nullValue) / standardError;
	const p =
		alternative === 'two-sided'
			? Math.min(1, 2 * computeStudentTSurvival(Math.abs(t), df))
			: computeStudentTSurvival(alternative === 'greater' ? t : -t, df);
	const tail = alternative === 'two-sided' ? (1 - level) / 2 : 1 - level;
	const reach = -computeStudentTQuantile(tail, df) * standardError;
	const interval = {
		lower: alternative === 'less' ? -Infinity : estimate - reach,
		upper: alternative === 'greater' ? Infinity : estimate + reach
	};
	return { ok: true, estimate, standardError, t, df, p, interval };
}

/**
 * Count, mean and sum of squares about the mean, by two passes.
 * @throws RangeError when a value is no number
 */
export function summarise(values: readonly number[]): SampleSummary {
	const wrong = values.findIndex((value) => !Number.isFinite(value));
	if (wrong >= 0) throw new RangeError(`value ${wrong + 1} is no number`);
	const n = values.length;
	const mean = n === 0 ? 0 : values.reduce((sum, value) => sum + value, 0) / n;
	const sumOfSquares = values.reduce((sum, value) => sum + (value - mean) ** 2, 0);
	return { n, mean, sumOfSquares };
}

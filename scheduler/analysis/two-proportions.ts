import { computeLogGamma } from '../statistics/log-gamma.ts';
import { computeNormalQuantile, computeNormalSurvival } from '../statistics/normal.ts';
import { computeWilsonInterval } from '../statistics/wilson-interval.ts';

export type TwoCounts = {
	/** Successes and trials of both groups. */
	successes: readonly [number, number];
	trials: readonly [number, number];
	/** Confidence of the intervals, 0.95 when left out. */
	level?: number;
};

export type TwoProportions = {
	/** First less second. */
	difference: number;
	/** From the Wilson intervals of both shares. */
	differenceInterval: { lower: number; upper: number };
	/** Score test with the pooled share, two-sided; null when all or none succeed. */
	score: { z: number; p: number } | null;
	/** Fisher's exact test, two-sided: tables no likelier than this one. */
	fisherP: number;
	/** Of the first against the second; with half a count added to each cell when one is empty. */
	oddsRatio: number;
	oddsRatioInterval: { lower: number; upper: number };
	isCorrected: boolean;
};

/**
 * Comparison of two shares.
 *
 * Shapes: counts in; difference, odds ratio and tests out. Units: shares 0 to 1.
 * Method: difference with R. Newcombe's hybrid score interval; odds ratio with the interval on its
 * logarithm (B. Woolf), half a count added to each cell when one is empty (J. Haldane).
 * Source: R. Newcombe, Stat Med 17 (1998) method 10; R prop.test(correct = FALSE) and fisher.test.
 * Accuracy: relative 1e-10; tests/reference/analysis.test.ts.
 * @throws RangeError when counts are not whole or do not fit together, or the level is not between 0
 * and 1
 */
export function compareProportions({ successes, trials, level = 0.95 }: TwoCounts): TwoProportions {
	requireCounts(successes, trials);
	const [x1, x2] = successes;
	const [n1, n2] = trials;
	const [p1, p2] = [x1 / n1, x2 / n2];
	const first = computeWilsonInterval({ successCount: x1, trialCount: n1, level });
	const second = computeWilsonInterval({ successCount: x2, trialCount: n2, level });
	const difference = p1 - p2;
	return {
		difference,
		differenceInterval: {
			lower: difference - Math.hypot(p1 - first.lower, second.upper - p2),
			upper: difference + Math.hypot(first.upper - p1, p2 - second.lower)
		},
		score: testScore(successes, trials),
		fisherP: computeFisher(successes, trials),
		...describeOdds([x1, n1 - x1, x2, n2 - x2], level)
	};
}

function testScore([x1, x2]: TwoCounts['successes'], [n1, n2]: TwoCounts['trials']) {
	const pooled = (x1 + x2) / (n1 + n2);
	const variance = pooled * (1 - pooled) * (1 / n1 + 1 / n2);
	if (!(variance > 0)) return null;
	const z = (x1 / n1 - x2 / n2) / Math.sqrt(variance);
	return { z, p: Math.min(1, 2 * computeNormalSurvival(Math.abs(z))) };
}

function describeOdds(counts: readonly [number, number, number, number], level: number) {
	const isCorrected = counts.includes(0);
	const [a, b, c, d] = counts.map((count) => count + (isCorrected ? 0.5 : 0)) as [
		number,
		number,
		number,
		number
	];
	const log = Math.log((a * d) / (b * c));
	const reach = computeNormalQuantile((1 + level) / 2) * Math.sqrt(1 / a + 1 / b + 1 / c + 1 / d);
	return {
		oddsRatio: Math.exp(log),
		oddsRatioInterval: { lower: Math.exp(log - reach), upper: Math.exp(log + reach) },
		isCorrected
	};
}

function computeFisher([x1, x2]: TwoCounts['successes'], [n1, n2]: TwoCounts['trials']): number {
	const total = x1 + x2;
	const logChoose = (n: number, k: number) =>
		computeLogGamma(n + 1) - computeLogGamma(k + 1) - computeLogGamma(n - k + 1);
	const logWeight = (x: number) => logChoose(n1, x) + logChoose(n2, total - x);
	const own = logWeight(x1);
	let [tail, all] = [0, 0];
	for (let x = Math.max(0, total - n2); x <= Math.min(n1, total); x += 1) {
		const weight = Math.exp(logWeight(x) - own);
		all += weight;
		// Tables as likely as this one count, up to rounding.
		if (weight <= 1 + 1e-7) tail += weight;
	}
	return Math.min(1, tail / all);
}

function requireCounts(successes: readonly number[], trials: readonly number[]): void {
	trials.forEach((n, i) => {
		const x = successes[i] ?? Number.NaN;
		if (!(Number.isInteger(n) && Number.isInteger(x) && n > 0 && x >= 0 && x <= n))
			throw new RangeError(`group ${i + 1}: counts must be whole, 0 to trials; got ${x} of ${n}`);
	});
}

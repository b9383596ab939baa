import { dot, entry, type Vector } from '../linear-algebra/vector.ts';
import { computeNormalSurvival } from '../statistics/normal.ts';
import { computeStudentTQuantile, computeStudentTSurvival } from '../statistics/student-t.ts';

export interface TrendStatistics {
	/** Least squares on 1 … n, with its standard error, t and two-sided p. */
	readonly slope: number;
	readonly slopeSe: number;
	readonly t: number;
	readonly p: number;
	/** Lag-1 correlation of the residuals. */
	readonly residualLagOne: number;
	/** Standard error by Newey and West with ⌊4·(n/100)^(2/9)⌋ lags. */
	readonly slopeSeNeweyWest: number;
	readonly mannKendall: { S: number; variance: number; z: number; p: number };
	/** Median of all pairwise slopes. */
	readonly theilSen: number;
}

/**
 * Whether a series rises or falls, by a straight line and by ranks.
 *
 * Shapes:  values (n), n >= 4, in order.
 * Units:   slopes in the unit of the values per place.
 * Method:  least squares; Newey and West with Bartlett weights and n/(n − 2); Mann and Kendall with
 *          corrections for ties and continuity; Theil and Sen.
 * Source:  method sheet C (Plateau rule). Accuracy: case plateau-slope to 1e-12 (R lm).
 * @throws {RangeError} fewer than four values
 */
export function describeTrend(values: Vector): TrendStatistics {
	const n = values.length;
	if (n < 4) throw new RangeError(`a trend needs at least 4 values, got ${n}`);
	const time = values.map((_, i) => i - (n - 1) / 2);
	const sxx = dot(time, time);
	const mean = values.reduce((sum, value) => sum + value, 0) / n;
	const slope = dot(time, values) / sxx;
	const rest = values.map((value, i) => value - mean - slope * entry(time, i));
	const power = dot(rest, rest);
	const slopeSe = Math.sqrt(power / (n - 2) / sxx);
	const t = slopeSe > 0 ? slope / slopeSe : slope === 0 ? 0 : Math.sign(slope) * 1e300;
	return {
		...{ slope, slopeSe, t, p: 2 * computeStudentTSurvival(Math.abs(t), n - 2) },
		residualLagOne: power > 0 ? dot(rest.slice(1), rest.slice(0, -1)) / power : 0,
		slopeSeNeweyWest: computeNeweyWestSe(time, rest),
		mannKendall: testMannKendall(values),
		theilSen: computeTheilSen(values)
	};
}

function computeNeweyWestSe(time: Vector, rest: Vector): number {
	const n = rest.length;
	const lags = Math.floor(4 * (n / 100) ** (2 / 9));
	const scores = rest.map((value, i) => value * entry(time, i));
	let sum = dot(scores, scores);
	for (let lag = 1; lag <= lags; lag++)
		sum += 2 * (1 - lag / (lags + 1)) * dot(scores.slice(lag), scores.slice(0, -lag));
	return Math.sqrt((Math.max(0, sum) * n) / (n - 2)) / dot(time, time);
}

function testMannKendall(values: Vector): TrendStatistics['mannKendall'] {
	const n = values.length;
	let S = 0;
	values.forEach((later, j) => {
		for (let i = 0; i < j; i++) S += Math.sign(later - entry(values, i));
	});
	const ties = new Map<number, number>();
	for (const value of values) ties.set(value, (ties.get(value) ?? 0) + 1);
	const lost = [...ties.values()].reduce((sum, k) => sum + k * (k - 1) * (2 * k + 5), 0);
	const variance = (n * (n - 1) * (2 * n + 5) - lost) / 18;
	if (!(variance > 0)) return { S, variance, z: 0, p: 1 };
	const z = S === 0 ? 0 : (S - Math.sign(S)) / Math.sqrt(variance);
	return { S, variance, z, p: Math.min(1, 2 * computeNormalSurvival(Math.abs(z))) };
}

function computeTheilSen(values: Vector): number {
	const slopes = values
		.flatMap((later, j) => values.slice(0, j).map((earlier, i) => (later - earlier) / (j - i)))
		.sort((a, b) => a - b);
	const half = slopes.length / 2;
	if (slopes.length % 2 === 1) return entry(slopes, Math.floor(half));
	return (entry(slopes, half - 1) + entry(slopes, half)) / 2;
}

export type PlateauVerdict =
	| {
			ok: true;
			verdict: 'plateau' | 'improving' | 'worsening' | 'undecided';
			/** Change over all blocks in SD of a trial, with its interval. */
			changeSd: number;
			changeLow: number;
			changeHigh: number;
			mannKendallP: number;
	  }
	| { ok: false; reason: 'too-few-blocks' | 'too-few-trials' | 'no-spread' };

const BLOCKS_MIN = 5;
const TRIALS_MIN = 100;

/**
 * Whether a person's error has stopped falling, judged by the last blocks.
 *
 * Shapes:  blocks in order: mean error, SD of a trial, trials.
 * Units:   change in pooled SD of a trial.
 * Method:  interval of slope × blocks (block means, t with n − 2 df; the larger of the plain and the
 *          Newey-West error) inside ± margin and Mann-Kendall p > .1: plateau. Mann-Kendall p < .05:
 *          improving or worsening. Else undecided: no change is never concluded from a test that found none.
 * Decision: block means and SDs, level and margin.
 * Source:  method sheet C (Plateau rule).
 */
export function judgePlateau(options: {
	blocks: readonly { mean: number; sd: number; trialCount: number }[];
	margin?: number;
	level?: number;
}): PlateauVerdict {
	const { blocks, margin = 0.25, level = 0.9 } = options;
	if (blocks.length < BLOCKS_MIN) return { ok: false, reason: 'too-few-blocks' };
	const trialCount = blocks.reduce((sum, block) => sum + block.trialCount, 0);
	if (trialCount < TRIALS_MIN) return { ok: false, reason: 'too-few-trials' };
	const freedom = blocks.reduce((sum, block) => sum + block.trialCount - 1, 0);
	const power = blocks.reduce((sum, block) => sum + (block.trialCount - 1) * block.sd ** 2, 0);
	const sd = Math.sqrt(power / freedom);
	if (!(sd > 0)) return { ok: false, reason: 'no-spread' };
	const trend = describeTrend(blocks.map(({ mean }) => mean));
	const span = blocks.length / sd;
	const error = Math.max(trend.slopeSe, trend.slopeSeNeweyWest) * span;
	const reach = computeStudentTQuantile((1 + level) / 2, blocks.length - 2) * error;
	const changeSd = trend.slope * span;
	const [changeLow, changeHigh] = [changeSd - reach, changeSd + reach];
	const { p, S } = trend.mannKendall;
	const isSmall = -margin < changeLow && changeHigh < margin;
	const verdict =
		isSmall && p > 0.1 ? 'plateau' : p < 0.05 ? (S < 0 ? 'improving' : 'worsening') : 'undecided';
	return { ok: true, verdict, changeSd, changeLow, changeHigh, mannKendallP: p };
}

import { dot, type Vector } from '../linear-algebra/vector.ts';
import { computeMean } from './moments.ts';
import { removeTrend } from './serial-dependence.ts';

export type SeriesMeasure =
	{ ok: true; value: number } | { ok: false; reason: 'few-trials' | 'no-spread' };

const SCALE_MIN = 4;
/** Scales that the slope is laid through at the least. */
const SCALES_MIN = 5;

/**
 * Correlation of each trial with the next: below 0 deviations are corrected too much, 0 just so, near 1
 * they are left alone.
 *
 * Shapes:  series (n), n >= 3.
 * Method:  Σ(x_t − x̄)(x_{t+1} − x̄) / Σ(x_t − x̄)², no trend removed.
 * Source:  Box, Jenkins & Reinsel 2008, section 2.1; method sheet B10; goal-sensitivity.test.ts.
 */
export function computeLagOne(series: Vector): SeriesMeasure {
	if (series.length < 3) return { ok: false, reason: 'few-trials' };
	const mean = computeMean(series);
	const rest = series.map((value) => value - mean);
	const power = dot(rest, rest);
	if (!(power > 0)) return { ok: false, reason: 'no-spread' };
	return { ok: true, value: dot(rest.slice(1), rest.slice(0, -1)) / power };
}

/**
 * Long-range dependence of a series (DFA-1): .5 independent trials, above .5 persistent, below corrected.
 *
 * Shapes:  series (n); scales by default each whole number from 4 to n/4.
 * Method:  running sum of the deviations from the mean, cut into windows that do not overlap, each less
 *          its straight line; slope of ln F(s) on ln s by least squares.
 * Source:  Peng et al. 1994, Phys Rev E 49:1685; method sheet B10; goal-sensitivity.test.ts.
 * Accuracy: relative 1e-10 of the definition.
 */
export function computeFluctuationExponent(
	series: Vector,
	scales: readonly number[] = listScales(series.length)
): SeriesMeasure {
	if (scales.length < SCALES_MIN) return { ok: false, reason: 'few-trials' };
	const profile = integrate(series);
	const fluctuations = scales.map((size) => computeFluctuation(profile, size));
	if (fluctuations.some((value) => !(value > 0))) return { ok: false, reason: 'no-spread' };
	const x = scales.map(Math.log);
	const y = fluctuations.map(Math.log);
	const [meanX, meanY] = [computeMean(x), computeMean(y)];
	const centered = x.map((value) => value - meanX);
	const slope =
		dot(
			centered,
			y.map((value) => value - meanY)
		) / dot(centered, centered);
	return { ok: true, value: slope };
}

function listScales(n: number): number[] {
	const last = Math.floor(n / 4);
	return Array.from({ length: Math.max(0, last - SCALE_MIN + 1) }, (_, i) => SCALE_MIN + i);
}

function integrate(series: Vector): number[] {
	const mean = computeMean(series);
	let sum = 0;
	return series.map((value) => (sum += value - mean));
}

/** Root mean square of the profile about the straight line of each window. */
function computeFluctuation(profile: Vector, size: number): number {
	const windows = Math.floor(profile.length / size);
	let squares = 0;
	for (let k = 0; k < windows; k++) {
		const rest = removeTrend(profile.slice(k * size, (k + 1) * size));
		squares += dot(rest, rest);
	}
	return Math.sqrt(squares / (windows * size));
}

import { findTailPoint } from './find-tail-point.ts';
import { computeBetaPrefactor, computeIncompleteBeta } from './incomplete-beta.ts';
import type { Tails } from './incomplete-gamma.ts';
import { computeNormalCdf } from './normal.ts';
import { findLast } from './poisson-mixture.ts';
import { computePoissonWeight } from './saddle-point.ts';

/** Degrees of freedom (any positive real) and noncentrality (any real up to 10 000 in size). */
export type NoncentralT = { df: number; ncp: number };

/**
 * Probability that a noncentral t value is at or below x.
 *
 * Shapes: numbers in, number out. Units: none.
 * Method: Poisson mixture of incomplete beta functions, summed over all weights above 1e-18 by the
 * downward recurrence, whose terms are all positive.
 * Source: W. Guenther, J Stat Comput Simul 6 (1978); R. Lenth, AS 243 (1989). jstat is not used:
 * absolute error 2e-8.
 * Accuracy: absolute 1e-11; tests/reference/distributions.test.ts.
 * @throws RangeError when df is not positive, ncp is too large or x is not a number
 * @example computeNoncentralTCdf(2, { df: 10, ncp: 1 }) // 0.7962...
 */
export function computeNoncentralTCdf(x: number, distribution: NoncentralT): number {
	return computeNoncentralTTails(x, distribution).lower;
}

/**
 * Probability that a noncentral t value is above x.
 *
 * Shapes: numbers in, number out. Units: none.
 * Method, source and accuracy: see {@link computeNoncentralTCdf}.
 * @throws RangeError when df is not positive, ncp is too large or x is not a number
 * @example computeNoncentralTSurvival(2.0017, { df: 58, ncp: 3.0984 }) // 0.861: power at n 30
 */
export function computeNoncentralTSurvival(x: number, distribution: NoncentralT): number {
	return computeNoncentralTTails(x, distribution).upper;
}

/**
 * The value that a share p of noncentral t values lies at or below.
 *
 * Shapes: numbers in, number out. Units: none. Method: root search on the logarithm of the tail.
 * Source: R qt(p, df, ncp). Accuracy: relative 1e-9 for p in 1e-8 to 1 - 1e-8;
 * tests/reference/noncentral.test.ts.
 * @throws RangeError when p is not in 0 to 1, df is not positive or ncp is too large
 */
export function computeNoncentralTQuantile(p: number, distribution: NoncentralT): number {
	return findTailPoint(p, (x) => computeNoncentralTTails(x, distribution), {
		...{ support: 'real', guess: distribution.ncp }
	});
}

/** Both tails at once; each is summed on its own, neither is 1 minus the other. */
export function computeNoncentralTTails(x: number, { df, ncp }: NoncentralT): Tails {
	if (!(df > 0 && df < Infinity)) throw new RangeError(`df must be positive, got ${df}`);
	if (!(Math.abs(ncp) <= 1e4)) throw new RangeError(`ncp must lie in -10000 to 10000, got ${ncp}`);
	if (Number.isNaN(x)) throw new RangeError('x must be a number');
	if (x < 0) {
		const mirrored = computeNoncentralTTails(-x, { df, ncp: -ncp });
		return { lower: mirrored.upper, upper: mirrored.lower };
	}
	const inside = sumMixture(x, df, ncp);
	const belowZero = computeNormalCdf(-ncp);
	return {
		lower: clampProbability(belowZero + inside.lower),
		upper: clampProbability(inside.upper)
	};
}

/** P(0 < T <= x) and P(T > x) for x >= 0. */
function sumMixture(x: number, df: number, ncp: number): Tails {
	// A smaller square changes no digit, and its ratios would overflow.
	const mean = Math.abs(ncp) < 1e-100 ? 0 : (ncp * ncp) / 2;
	const parts = splitUnit(x, df);
	const last = Math.ceil(mean + 9.5 * Math.sqrt(mean) + 40);
	const even = sumSeries({ offset: 0, last, mean, b: df / 2, ...parts });
	const odd =
		mean === 0
			? { lower: 0, upper: 0 }
			: sumSeries({ offset: 0.5, last, mean, b: df / 2, ...parts });
	const sign = ncp < 0 ? -1 : 1;
	return {
		lower: (even.lower + sign * odd.lower) / 2,
		upper: (even.upper + sign * odd.upper) / 2
	};
}

type Series = {
	offset: 0 | 0.5;
	last: number;
	mean: number;
	b: number;
	x: number;
	complement: number;
};

/** Sums weight(j + offset) times both beta tails at a = j + offset + 1/2, from `last` down to 0. */
function sumSeries(series: Series): Tails {
	const { offset, mean } = series;
	const last = mean === 0 ? series.last : findLast(mean, series.last, offset);
	const sum: Tails = { lower: 0, upper: 0 };
	let beta = startBeta(series, last + offset + 0.5);
	let weight = mean === 0 ? 0 : computePoissonWeight(last + offset, mean);
	for (let j = last; j >= 0; j -= 1) {
		if (mean === 0) weight = j === 0 ? 1 : 0;
		sum.lower += weight * beta.lower;
		sum.upper += weight * beta.upper;
		if (j === 0) return sum;
		beta = stepDown(series, beta);
		weight *= mean === 0 ? 0 : (j + offset) / mean;
	}
	return sum;
}

/** Both beta tails at `a`, and I(a) - I(a + 1). */
type BetaState = Tails & { a: number; step: number };

function startBeta({ b, x, complement }: Series, a: number): BetaState {
	const tails = computeIncompleteBeta({ a, b, x, complement });
	if (x === 0 || complement === 0) return { ...tails, a, step: 0 };
	return { ...tails, a, step: computeBetaPrefactor({ a, b, x, complement }) / a };
}

/** From a to a - 1: I grows by x^(a-1) (1-x)^b / ((a-1) B(a-1, b)). */
function stepDown(series: Series, { a, lower, upper, step }: BetaState): BetaState {
	if (series.x === 0 || series.complement === 0) return { a: a - 1, lower, upper, step };
	// After an underflow there is nothing to recur from: compute afresh.
	if (step < 1e-290) return startBeta(series, a - 1);
	const nextStep = (step * a) / ((a - 1 + series.b) * series.x);
	return { a: a - 1, lower: lower + nextStep, upper: upper - nextStep, step: nextStep };
}

function splitUnit(t: number, df: number): { x: number; complement: number } {
	if (t === Infinity) return { x: 1, complement: 0 };
	const ratio = (t * t) / df;
	return { x: ratio / (1 + ratio), complement: 1 / (1 + ratio) };
}

function clampProbability(value: number): number {
	return Math.min(1, Math.max(0, value));
}

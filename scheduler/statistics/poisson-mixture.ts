import type { Tails } from './incomplete-gamma.ts';
import { computePoissonWeight } from './saddle-point.ts';

/** The central distributions that a noncentral one mixes, numbered j = 0, 1, 2, … */
export type MixedDistributions = {
	/** Both tails of number j at the point in question. */
	computeTails: (j: number) => Tails;
	/** Lower tail of number j less that of number j + 1; never negative. */
	computeStep: (j: number) => number;
	/** computeStep(j) / computeStep(j - 1), for j from 1. */
	computeStepRatio: (j: number) => number;
};

/** Below this a step has lost its digits, or may have: it is computed afresh. */
const STEP_MIN = 1e-290;
const SHARE_LEFT = 1e-17;
const WEIGHT_MIN = 1e-280;
/** A smaller mean changes no digit, and its ratios would overflow. */
const MEAN_MIN = 1e-200;

/**
 * Both tails of a mixture of distributions with Poisson weights.
 *
 * Shapes: mean of the weights and the mixed distributions in, both tails out. Units: none.
 * Method: the lower tail is summed downwards from 9.5 standard deviations above the mode of the
 * weights, the upper tail upwards from as far below it, both by recurrences whose terms are all
 * positive. Each sum goes on past the mode until the bound of what is left (not the last term: the
 * mixed tails grow there) is below 1e-17 of it. So either tail keeps its relative accuracy.
 * Source: D. Benton and K. Krishnamoorthy, Comput Stat Data Anal 43 (2003): from the mode both ways.
 * Accuracy: relative 1e-11 of each tail; tests/reference/noncentral.test.ts.
 * @throws RangeError when the mean is negative
 */
export function sumPoissonMixture(mean: number, mixed: MixedDistributions): Tails {
	if (mean < MEAN_MIN) return mixed.computeTails(0);
	const reach = 9.5 * Math.sqrt(mean) + 40;
	const last = findLast(mean, Math.ceil(mean + reach), 0);
	const first = Math.max(0, Math.floor(mean - reach));
	return {
		lower: Math.min(1, sumDownwards(mean, last, mixed)),
		upper: Math.min(1, sumUpwards(mean, first, mixed))
	};
}

/** The largest index up to `highest` whose weight has not underflowed: a tiny mean has few. */
export function findLast(mean: number, highest: number, offset: 0 | 0.5): number {
	let last = highest;
	while (last > 0 && computePoissonWeight(last + offset, mean) < WEIGHT_MIN) last -= 1;
	return last;
}

function sumDownwards(mean: number, last: number, mixed: MixedDistributions): number {
	let weight = computePoissonWeight(last, mean);
	let tail = mixed.computeTails(last).lower;
	let step = mixed.computeStep(last);
	let sum = 0;
	for (let j = last; ; j -= 1) {
		sum += weight * tail;
		const isRestSmall = j < mean && weight * (j / (mean - j)) < SHARE_LEFT * sum;
		if (j === 0 || isRestSmall) return sum;
		weight *= j / mean;
		if (step < STEP_MIN) {
			step = mixed.computeStep(j - 1);
			tail = mixed.computeTails(j - 1).lower;
		} else {
			step /= mixed.computeStepRatio(j);
			tail += step;
		}
	}
}

function sumUpwards(mean: number, first: number, mixed: MixedDistributions): number {
	let weight = computePoissonWeight(first, mean);
	let tail = mixed.computeTails(first).upper;
	let step = mixed.computeStep(first);
	let sum = 0;
	for (let j = first; ; j += 1) {
		sum += weight * tail;
		const next = weight * (mean / (j + 1));
		if (j > mean && next / (1 - mean / (j + 2)) <= SHARE_LEFT * sum) return sum;
		if (next === 0) return sum;
		weight = next;
		if (step < STEP_MIN) {
			tail = mixed.computeTails(j + 1).upper;
			step = mixed.computeStep(j + 1);
		} else {
			tail += step;
			step *= mixed.computeStepRatio(j + 1);
		}
	}
}

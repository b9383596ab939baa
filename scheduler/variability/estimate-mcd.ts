import { computeCholesky, logDeterminantFromCholesky } from '../linear-algebra/cholesky.ts';
import { scaleMatrix } from '../linear-algebra/matrix.ts';
import { entry, row, type Matrix } from '../linear-algebra/vector.ts';
import { drawOrder } from '../random/random-stream.ts';
import { createSeededStream } from '../random/seeded-stream.ts';
import { computeChiSquareQuantile } from '../statistics/chi-square.ts';
import { computeSquaredDistances } from './mahalanobis.ts';
import {
	computeConsistencyFactor,
	computeSmallSampleFactor,
	computeSubsetSize,
	countSubsets,
	findNextSubset
} from './mcd-factors.ts';
import { computeCovariance, computeMeanVector } from './moments.ts';

export interface McdOptions {
	/** Share of trials that a subset must hold, .5 (default) to 1. */
	readonly share?: number;
	/** Size of the subset itself; overrides the share. */
	readonly subsetSize?: number;
	readonly startCount?: number;
	readonly seed?: number;
	/** Trials within this quantile of χ²(d) are kept. */
	readonly quantile?: number;
	/** Whether covariances carry the small-sample factors (default) or the consistency factor alone. */
	readonly isSmallSampleCorrected?: boolean;
}

export interface McdSubset {
	/** Trials of the subset, counted from 0, ascending. */
	readonly trials: readonly number[];
	readonly mean: readonly number[];
	/** Plain covariance of the subset, divisor h − 1. */
	readonly covariance: readonly (readonly number[])[];
	readonly logDeterminant: number;
	/** Whether every subset was looked at. */
	readonly isExact: boolean;
}

export type McdCloud =
	| {
			ok: true;
			/** Mean and corrected covariance of the trials that are kept. */
			mean: number[];
			covariance: number[][];
			kept: boolean[];
			/** Mean and corrected covariance of the best subset. */
			rawMean: readonly number[];
			rawCovariance: number[][];
			/** Consistency and small-sample factor of each stage. */
			rawFactors: [number, number];
			factors: [number, number];
			subset: McdSubset;
	  }
	| { ok: false; reason: 'singular-covariance' };

const EXACT_MAX = 1e4;
const START_COUNT = 500;
const SEED = 20240607;
const KEEP_QUANTILE = 0.975;
const STEPS_MAX = 100;

/**
 * Mean and covariance from the half of the trials that lies closest together: withstands nearly half
 * stray trials.
 *
 * Shapes:  executions (trials × d), trials >= 2·(d + 1).
 * Method:  minimum covariance determinant of h trials: all subsets when there are at most 10⁴, else
 *          C-steps from 500 seeded starts of d + 1 trials; consistency and small-sample factors; then
 *          mean and covariance of the trials within the .975 quantile of χ²(d).
 * Source:  Rousseeuw & Van Driessen 1999; method sheet B3 (ii); case mcd-hbk (R robustbase covMcd).
 * Accuracy: the same subset as R in the cases, numbers relative 1e-8.
 * @throws {RangeError} too few trials, or a subset size outside d + 1 … trials
 */
export function estimateMcd(executions: Matrix, options: McdOptions = {}): McdCloud {
	const n = executions.length;
	const d = row(executions, 0).length;
	if (n < 2 * (d + 1)) throw new RangeError('estimateMcd requires at least 2·(d + 1) trials');
	const { share = 0.5, quantile = KEEP_QUANTILE, isSmallSampleCorrected = true } = options;
	const subset = findMcdSubset(executions, options);
	if (!subset) return { ok: false, reason: 'singular-covariance' };
	const small = (stage: 'raw' | 'reweighted') =>
		isSmallSampleCorrected
			? computeSmallSampleFactor({ trialCount: n, variableCount: d, share, stage })
			: 1;
	const consistency = computeConsistencyFactor(subset.trials.length / n, d);
	const rawFactors: [number, number] = [consistency, small('raw')];
	const rawCovariance = scaleMatrix(subset.covariance, rawFactors[0] * rawFactors[1]);
	const distances = computeSquaredDistances({
		...{ executions, center: subset.mean, covariance: rawCovariance }
	});
	if (!distances.ok) return distances;
	const cut = computeChiSquareQuantile(quantile, d);
	const kept = distances.values.map((value) => value < cut);
	const used = executions.filter((_, i) => kept[i]);
	if (used.length <= d) return { ok: false, reason: 'singular-covariance' };
	const factors: [number, number] = [
		computeConsistencyFactor(used.length / n, d),
		small('reweighted')
	];
	return {
		ok: true,
		mean: computeMeanVector(used),
		covariance: scaleMatrix(computeCovariance(used), factors[0] * factors[1]),
		...{ kept, rawMean: subset.mean, rawCovariance, rawFactors, factors, subset }
	};
}

/**
 * The h trials whose covariance has the smallest determinant; null when some h trials lie flat.
 * @throws {RangeError} a subset size outside d + 1 … trials
 */
export function findMcdSubset(executions: Matrix, options: McdOptions = {}): McdSubset | null {
	const n = executions.length;
	const d = row(executions, 0).length;
	const { share = 0.5, subsetSize: h = computeSubsetSize(n, d, share) } = options;
	if (!Number.isInteger(h) || h <= d || h > n)
		throw new RangeError(`a subset must hold ${d + 1} to ${n} trials, got ${h}`);
	return countSubsets(n, h) <= EXACT_MAX
		? searchAll(executions, h)
		: searchFromStarts(executions, h, options);
}

function searchAll(executions: Matrix, h: number): McdSubset | null {
	let best: McdSubset | null = null;
	let trials: number[] | null = Array.from({ length: h }, (_, i) => i);
	while (trials) {
		const described = describeSubset(executions, trials, true);
		if (!described) return null;
		best = betterOf(best, described);
		trials = findNextSubset(trials, executions.length);
	}
	return best;
}

function searchFromStarts(executions: Matrix, h: number, options: McdOptions): McdSubset | null {
	const { startCount = START_COUNT, seed = SEED } = options;
	const stream = createSeededStream(seed);
	const all = executions.map((_, i) => i);
	let best: McdSubset | null = null;
	for (let start = 0; start < startCount; start++) {
		const found = concentrate(executions, h, drawOrder(stream, all));
		if (!found) return null;
		best = betterOf(best, found);
	}
	return best;
}

/**
 * C-steps from the first d + 1 trials of an order, more if those lie flat, until nothing changes; null
 * when they end in h trials that lie flat.
 */
function concentrate(executions: Matrix, h: number, order: readonly number[]): McdSubset | null {
	let count = row(executions, 0).length + 1;
	let current = describeSubset(executions, order.slice(0, count), false);
	while (!current && count < order.length)
		current = describeSubset(executions, order.slice(0, ++count), false);
	for (let step = 0; current && step < STEPS_MAX; step++) {
		const nearest: number[] = pickNearest(executions, current, h);
		if (nearest.length === current.trials.length && nearest.every(isAt(current.trials)))
			return current;
		const next = describeSubset(executions, nearest, false);
		if (!next) return null;
		current = next;
	}
	return current;
}

function isAt(trials: readonly number[]) {
	return (trial: number, i: number) => trial === trials[i];
}

function pickNearest(executions: Matrix, { mean, covariance }: McdSubset, h: number): number[] {
	const distances = computeSquaredDistances({ executions, center: mean, covariance });
	const values = distances.ok ? distances.values : [];
	const order = values
		.map((_, i) => i)
		.sort((a, b) => entry(values, a) - entry(values, b) || a - b);
	return order.slice(0, h).sort((a, b) => a - b);
}

function describeSubset(executions: Matrix, trials: number[], isExact: boolean): McdSubset | null {
	const rows = trials.map((trial) => row(executions, trial));
	const covariance = computeCovariance(rows);
	const factor = computeCholesky(covariance);
	if (!factor.ok) return null;
	const logDeterminant = logDeterminantFromCholesky(factor.lower);
	return { trials, mean: computeMeanVector(rows), covariance, logDeterminant, isExact };
}

function betterOf(best: McdSubset | null, other: McdSubset): McdSubset {
	return best && best.logDeterminant <= other.logDeterminant ? best : other;
}

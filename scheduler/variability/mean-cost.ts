import { transpose } from '../linear-algebra/matrix.ts';
import { entry, type Matrix, type Vector } from '../linear-algebra/vector.ts';
import { drawOrder } from '../random/random-stream.ts';
import { createSeededStream } from '../random/seeded-stream.ts';
import { computeMean, computeStandardDeviation } from './moments.ts';

/** What one execution costs: the result shown to people, 0 at best. NaN where it is not defined. */
export type Cost = (execution: Vector) => number;

export type MeanCost =
	| {
			ok: true;
			mean: number;
			/** Variance of the cost over trials, divisor: their number. */
			variance: number;
			/** 0 when every combination was taken. */
			standardError: number;
	  }
	| { ok: false; reason: 'undefined-cost' };

export interface CrossingOptions {
	readonly seed?: number;
	/** Most combinations that are all taken; beyond that permutations are drawn. */
	readonly combinationMax?: number;
	readonly permutationCount?: number;
}

const COMBINATION_MAX = 1e6;
const PERMUTATION_COUNT = 500;
const SEED = 20240608;

/**
 * Mean cost of trials as they were made.
 *
 * Shapes:  executions (trials × d). Units: those of the cost.
 */
export function computeMeanCost(executions: Matrix, cost: Cost): MeanCost {
	const tally = createTally();
	for (const execution of executions) if (!tally.add(cost(execution))) return UNDEFINED_COST;
	return { ok: true, ...tally.read(), standardError: 0 };
}

/**
 * Mean cost of trials whose variables do not co-vary: the expectation over independent permutations of
 * the columns.
 *
 * Shapes:  executions (trials × d). Units: those of the cost.
 * Method:  exact, over all combinations of the values of each variable (n^d); above 10⁶ of them 500
 *          seeded permutations, with the standard error of their mean.
 * Source:  Müller & Sternad 2003, Biol Cybern 89:22; method sheet B8; case tnc-linear-abs (D1_perm).
 * Accuracy: exact up to rounding when all combinations are taken.
 */
export function computeCovariationFreeCost(
	executions: Matrix,
	cost: Cost,
	options: CrossingOptions = {}
): MeanCost {
	const columns = transpose(executions);
	const { combinationMax = COMBINATION_MAX } = options;
	return executions.length ** columns.length <= combinationMax
		? crossAll(columns, cost)
		: permuteSome(columns, cost, options);
}

const UNDEFINED_COST = { ok: false, reason: 'undefined-cost' } as const;

function crossAll(columns: Matrix, cost: Cost): MeanCost {
	const n = columns[0]?.length ?? 0;
	const places = columns.map(() => 0);
	const execution = columns.map((values) => entry(values, 0));
	const tally = createTally();
	for (;;) {
		if (!tally.add(cost(execution))) return UNDEFINED_COST;
		let axis = 0;
		while (axis < places.length && entry(places, axis) === n - 1) {
			places[axis] = 0;
			execution[axis] = entry(columns[axis] ?? [], 0);
			axis++;
		}
		if (axis === places.length) return { ok: true, ...tally.read(), standardError: 0 };
		const place = entry(places, axis) + 1;
		places[axis] = place;
		execution[axis] = entry(columns[axis] ?? [], place);
	}
}

function permuteSome(columns: Matrix, cost: Cost, options: CrossingOptions): MeanCost {
	const { seed = SEED, permutationCount = PERMUTATION_COUNT } = options;
	const stream = createSeededStream(seed);
	const all = createTally();
	const means: number[] = [];
	for (let round = 0; round < permutationCount; round++) {
		const shuffled = columns.map((values, axis) =>
			axis === 0 ? values : drawOrder(stream, values)
		);
		const tally = createTally();
		for (const execution of transpose(shuffled)) {
			const value = cost(execution);
			if (!tally.add(value) || !all.add(value)) return UNDEFINED_COST;
		}
		means.push(tally.read().mean);
	}
	const standardError = computeStandardDeviation(means) / Math.sqrt(permutationCount);
	return { ok: true, mean: computeMean(means), variance: all.read().variance, standardError };
}

/** Running mean and variance (Welford); refuses a value that is not finite. */
function createTally() {
	let [count, mean, squares] = [0, 0, 0];
	return {
		add(value: number): boolean {
			if (!Number.isFinite(value)) return false;
			count++;
			const step = value - mean;
			mean += step / count;
			squares += step * (value - mean);
			return true;
		},
		read: () => ({ mean, variance: count > 0 ? squares / count : 0 })
	};
}

export type CovariationIndex =
	| {
			ok: true;
			/** 1: all variation is taken away by covariation; 0: none; below 0: it adds variation. */
			index: number;
			resultVariance: number;
			freeVariance: number;
	  }
	| { ok: false; reason: 'undefined-cost' | 'no-spread' };

/**
 * How much of the result's variance covariation takes away.
 *
 * Shapes:  executions (trials × d); result: signed result of an execution.
 * Method:  1 − var(f) / var(f without covariation), divisor n.
 * Source:  Müller & Sternad 2003 (generalised R); method sheet B8; case covariation-index.
 */
export function computeCovariationIndex(
	executions: Matrix,
	result: Cost,
	options: CrossingOptions = {}
): CovariationIndex {
	const made = computeMeanCost(executions, result);
	const free = computeCovariationFreeCost(executions, result, options);
	if (!made.ok) return made;
	if (!free.ok) return free;
	if (!(free.variance > 0)) return { ok: false, reason: 'no-spread' };
	return {
		ok: true,
		index: 1 - made.variance / free.variance,
		...{ resultVariance: made.variance, freeVariance: free.variance }
	};
}

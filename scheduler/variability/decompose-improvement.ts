import { add, row, type Matrix } from '../linear-algebra/vector.ts';
import {
	computeCovariationFreeCost,
	computeMeanCost,
	type Cost,
	type CrossingOptions
} from './mean-cost.ts';
import { centerExecutions, computeMeanVector } from './moments.ts';

/** Parts of an improvement; above 0 they make the cost smaller. */
export interface ImprovementParts {
	readonly tolerance: number;
	readonly noise: number;
}

export interface Decomposition {
	/** Mean cost of each block as made, and without covariation. */
	readonly before: number;
	readonly after: number;
	readonly beforeFree: number;
	readonly afterFree: number;
	/** Mean cost without covariation of block 1 moved to the place of block 2, and the other way round. */
	readonly shifted: number;
	readonly respread: number;
	/** The place changes first, then the spread; and the other way round. */
	readonly shiftFirst: ImprovementParts;
	readonly spreadFirst: ImprovementParts;
	/** Average of both orders, and how far they lie apart. */
	readonly shapley: ImprovementParts;
	readonly range: number;
	/** Does not depend on the order. */
	readonly covariation: number;
	/** before − after = tolerance + noise + covariation, in each order. */
	readonly total: number;
	/** Largest standard error of the four means without covariation; 0 when exact. */
	readonly standardError: number;
}

export type DecompositionResult =
	({ ok: true } & Decomposition) | { ok: false; reason: 'undefined-cost' };

/**
 * Splits the improvement from one block to another into a better place (tolerance), less spread (noise)
 * and better co-variation of the variables.
 *
 * Shapes:  before, after (trials × d), the same d; cost of an execution.
 * Units:   those of the cost; above 0 is improvement.
 * Method:  sequential, in both orders, with their average (Shapley) and range, since tolerance and noise
 *          depend on the order; means without covariation by the full crossing of the columns.
 * Source:  Müller & Sternad 2004; method sheet B8 (a); cases tnc-linear-abs, tnc-tether.
 * Accuracy: exact up to rounding when all combinations are taken (n^d <= 10⁶).
 * @throws {RangeError} blocks of different numbers of variables
 */
export function decomposeImprovement(
	before: Matrix,
	after: Matrix,
	cost: Cost,
	options: CrossingOptions = {}
): DecompositionResult {
	const [from, to] = [computeMeanVector(before), computeMeanVector(after)];
	if (row(before, 0).length !== to.length)
		throw new RangeError('decomposeImprovement requires blocks of the same variables');
	const free = (executions: Matrix) => computeCovariationFreeCost(executions, cost, options);
	const made = [computeMeanCost(before, cost), computeMeanCost(after, cost)];
	const crossed = [
		free(before),
		free(after),
		free(centerExecutions(before).map((rest) => add(rest, to))),
		free(centerExecutions(after).map((rest) => add(rest, from)))
	];
	const means = [...made, ...crossed].flatMap((result) => (result.ok ? [result.mean] : []));
	const [D1, D2, free1, free2, shifted, respread] = means;
	if (respread === undefined) return { ok: false, reason: 'undefined-cost' };
	const errors = crossed.map((result) => (result.ok ? result.standardError : 0));
	return {
		ok: true,
		...combine([D1, D2, free1, free2, shifted, respread]),
		standardError: Math.max(...errors)
	};
}

function combine(means: readonly (number | undefined)[]): Omit<Decomposition, 'standardError'> {
	const [before = 0, after = 0, beforeFree = 0, afterFree = 0, shifted = 0, respread = 0] = means;
	const shiftFirst = { tolerance: beforeFree - shifted, noise: shifted - afterFree };
	const spreadFirst = { tolerance: respread - afterFree, noise: beforeFree - respread };
	return {
		...{ before, after, beforeFree, afterFree, shifted, respread, shiftFirst, spreadFirst },
		shapley: {
			tolerance: (shiftFirst.tolerance + spreadFirst.tolerance) / 2,
			noise: (shiftFirst.noise + spreadFirst.noise) / 2
		},
		range: Math.abs(shiftFirst.tolerance - spreadFirst.tolerance),
		covariation: before - beforeFree - (after - afterFree),
		total: before - after
	};
}

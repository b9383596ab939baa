import { transpose } from '../linear-algebra/matrix.ts';
import { add, entry, scale, type Matrix, type Vector } from '../linear-algebra/vector.ts';
import { computeMeanCost, type Cost } from './mean-cost.ts';
import { centerExecutions, computeMeanVector } from './moments.ts';
import { pairBetter } from './pair-better.ts';

export interface VariabilityCosts {
	/** Mean cost of the trials as made. */
	readonly mean: number;
	/** What the best place, the best spread and the best pairing would each save; they do not add up. */
	readonly tolerance: number;
	readonly noise: number;
	readonly covariation: number;
	/** Shift of all trials, in the units of the variables, that is best. */
	readonly bestShift: readonly number[];
	/** Part of the spread, 0 to 1, that is best. */
	readonly bestScale: number;
	/** Whether the best pairing is certain (two variables, at most 600 trials). */
	readonly isPairingExact: boolean;
}

export type VariabilityCostsResult =
	({ ok: true } & VariabilityCosts) | { ok: false; reason: 'undefined-cost' };

export interface CostOptions {
	/** Lowest and highest value of each variable; shifted trials stay inside. */
	readonly ranges: readonly { readonly min: number; readonly max: number }[];
	/** Places of the grid along each variable; by default about 10⁴ places in all. */
	readonly gridSteps?: number;
	/** Whether the best place of the grid is made finer (default). */
	readonly isRefined?: boolean;
	readonly seed?: number;
}

const GRID_PLACES = 1e4;
const SCALE_STEPS = 101;
const HALVINGS = 12;

/**
 * What a block's place, spread and pairing of variables each cost against the best one could do.
 *
 * Shapes:  executions (trials × d), ranges (d); cost of an execution.
 * Units:   those of the cost; each part is 0 or more. Do not add or stack them.
 * Method:  tolerance: rigid shifts on a grid inside the ranges, the best made finer by halving steps;
 *          noise: a common factor 0 … 1 in 101 steps about the mean; covariation: the best pairing, see
 *          pair-better.ts. A shift or factor whose costs are not all defined is passed over.
 * Source:  Cohen & Sternad 2009, Exp Brain Res 193:69; method sheet B8 (b); improvement.test.ts.
 * Accuracy: pairing exact for two variables; shift to the 4096th part of a grid step in a smooth valley.
 * @throws {RangeError} not one range for each variable
 */
export function computeVariabilityCosts(
	executions: Matrix,
	cost: Cost,
	options: CostOptions
): VariabilityCostsResult {
	const made = computeMeanCost(executions, cost);
	if (!made.ok) return made;
	if (options.ranges.length !== computeMeanVector(executions).length)
		throw new RangeError('computeVariabilityCosts requires one range for each variable');
	const shift = findBestShift(executions, cost, options);
	const spread = findBestScale(executions, cost);
	const pairing = pairBetter(executions, cost, { seed: options.seed });
	if (!pairing.ok) return pairing;
	return {
		...{ ok: true, mean: made.mean },
		tolerance: Math.max(0, made.mean - shift.mean),
		noise: Math.max(0, made.mean - spread.mean),
		covariation: Math.max(0, made.mean - pairing.mean),
		...{ bestShift: shift.shift, bestScale: spread.scale, isPairingExact: pairing.isExact }
	};
}

function findBestScale(executions: Matrix, cost: Cost): { scale: number; mean: number } {
	const center = computeMeanVector(executions);
	const rests = centerExecutions(executions);
	return Array.from({ length: SCALE_STEPS }, (_, i) => {
		const factor = 1 - i / (SCALE_STEPS - 1);
		const moved = i === 0 ? executions : rests.map((rest) => add(center, scale(rest, factor)));
		return { scale: factor, mean: meanOrInfinity(moved, cost) };
	}).reduce((best, other) => (other.mean < best.mean ? other : best));
}

interface Shift {
	readonly shift: readonly number[];
	readonly mean: number;
}

function findBestShift(executions: Matrix, cost: Cost, options: CostOptions): Shift {
	const d = options.ranges.length;
	const { gridSteps = Math.max(2, Math.round(GRID_PLACES ** (1 / d))), isRefined = true } = options;
	const limits = transpose(executions).map((values, axis) => ({
		low: Math.min(0, (options.ranges[axis]?.min ?? 0) - Math.min(...values)),
		high: Math.max(0, (options.ranges[axis]?.max ?? 0) - Math.max(...values))
	}));
	const steps = limits.map(({ low, high }) => (high - low) / (gridSteps - 1));
	const at = (shift: Vector): Shift => ({
		shift,
		mean: meanOrInfinity(
			executions.map((execution) => add(execution, shift)),
			cost
		)
	});
	let best = at(limits.map(() => 0));
	for (let place = 0; place < gridSteps ** d; place++) {
		const shift = limits.map(
			({ low }, axis) =>
				low + entry(steps, axis) * (Math.floor(place / gridSteps ** axis) % gridSteps)
		);
		best = betterOf(best, at(shift));
	}
	const isInside = (shift: Vector) =>
		limits.every(({ low, high }, axis) => entry(shift, axis) >= low && entry(shift, axis) <= high);
	return isRefined ? refine(best, steps, at, isInside) : best;
}

/** Steps along each variable, halved whenever none is better. */
function refine(
	start: Shift,
	steps: Vector,
	at: (shift: Vector) => Shift,
	isInside: (shift: Vector) => boolean
): Shift {
	let best = start;
	for (let halving = 0; halving < HALVINGS; halving++) {
		const reach = steps.map((step) => step / 2 ** (halving + 1));
		for (let isBetter = true; isBetter;) {
			const here = best;
			for (const [axis, step] of reach.flatMap((step, i): [number, number][] => [
				[i, step],
				[i, -step]
			])) {
				const shift = best.shift.map((value, i) => (i === axis ? value + step : value));
				if (step !== 0 && isInside(shift)) best = betterOf(best, at(shift));
			}
			isBetter = best.mean < here.mean;
		}
	}
	return best;
}

function betterOf(best: Shift, other: Shift): Shift {
	return other.mean < best.mean ? other : best;
}

function meanOrInfinity(executions: Matrix, cost: Cost): number {
	const made = computeMeanCost(executions, cost);
	return made.ok ? made.mean : Infinity;
}

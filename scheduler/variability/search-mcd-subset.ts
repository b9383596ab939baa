import {
	computeCholesky,
	logDeterminantFromCholesky,
	solveLower
} from '../linear-algebra/cholesky.ts';
import { dot, row, subtract, type Matrix } from '../linear-algebra/vector.ts';
import { drawBelow, type Uint32Stream } from '../random/random-stream.ts';
import { createSeededStream } from '../random/seeded-stream.ts';
import { computeSubsetSize, countSubsets, findNextSubset } from './mcd-factors.ts';
import { computeCovariance, computeMeanVector } from './moments.ts';

export interface McdSearch {
	/** Share of trials that a subset must hold, .5 (default) to 1. */
	readonly share?: number;
	/** Size of the subset itself; overrides the share. */
	readonly subsetSize?: number | undefined;
	readonly startCount?: number;
	readonly seed?: number;
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

/** A subset with the factor of its covariance. */
interface Found extends Omit<McdSubset, 'isExact'> {
	readonly lower: Matrix;
}

const EXACT_MAX = 1e4;
const START_COUNT = 500;
const SEED = 20240607;
const STEPS_MAX = 100;
/** Above so many trials only the best starts are followed to the end. */
const FULL_SEARCH_TRIALS = 200;
const FIRST_STEPS = 2;
const FOLLOWED = 10;

/**
 * The h trials whose covariance has the smallest determinant; null when some h trials lie flat.
 *
 * Method:  all subsets when there are at most 10⁴, else C-steps from seeded starts of d + 1 trials; above
 *          200 trials two steps each, the ten best to the end.
 * Source:  Rousseeuw & Van Driessen 1999, Technometrics 41:212.
 * @throws {RangeError} a subset size outside d + 1 … trials
 */
export function findMcdSubset(executions: Matrix, options: McdSearch = {}): McdSubset | null {
	const n = executions.length;
	const d = row(executions, 0).length;
	const { share = 0.5, subsetSize: h = computeSubsetSize(n, d, share) } = options;
	if (!Number.isInteger(h) || h <= d || h > n)
		throw new RangeError(`a subset must hold ${d + 1} to ${n} trials, got ${h}`);
	const isExact = countSubsets(n, h) <= EXACT_MAX;
	const best = isExact ? searchAll(executions, h) : searchFromStarts(executions, h, options);
	if (!best) return null;
	const { trials, mean, covariance, logDeterminant } = best;
	return { trials, mean, covariance, logDeterminant, isExact };
}

function searchAll(executions: Matrix, h: number): Found | null {
	let best: Found | null = null;
	let trials: number[] | null = Array.from({ length: h }, (_, i) => i);
	while (trials) {
		const described = describeSubset(executions, trials);
		if (!described) return null;
		if (!best || described.logDeterminant < best.logDeterminant) best = described;
		trials = findNextSubset(trials, executions.length);
	}
	return best;
}

function searchFromStarts(executions: Matrix, h: number, options: McdSearch): Found | null {
	const { startCount = START_COUNT, seed = SEED } = options;
	const stream = createSeededStream(seed);
	const steps = executions.length > FULL_SEARCH_TRIALS ? FIRST_STEPS : STEPS_MAX;
	const found: Found[] = [];
	for (let start = 0; start < startCount; start++) {
		const drawn = drawStart(executions, stream);
		const reached = drawn && concentrate(executions, h, drawn, steps);
		if (!reached) return null;
		found.push(reached);
	}
	found.sort((a, b) => a.logDeterminant - b.logDeterminant);
	const followed = found
		.slice(0, steps === STEPS_MAX ? 1 : FOLLOWED)
		.map((candidate) => concentrate(executions, h, candidate, STEPS_MAX));
	return followed.reduce((best, other) =>
		best && other && other.logDeterminant < best.logDeterminant ? other : best && other && best
	);
}

/** d + 1 trials drawn at random, more while they lie flat; null when all of them do. */
function drawStart(executions: Matrix, stream: Uint32Stream): Found | null {
	const least = row(executions, 0).length + 1;
	const chosen = new Set<number>();
	while (chosen.size < executions.length) {
		chosen.add(drawBelow(stream, executions.length));
		const drawn = chosen.size >= least ? describeSubset(executions, [...chosen]) : null;
		if (drawn) return drawn;
	}
	return null;
}

/** C-steps until nothing changes or so many are done; null when they end in h trials that lie flat. */
function concentrate(executions: Matrix, h: number, start: Found, steps: number): Found | null {
	let current = start;
	for (let step = 0; step < steps; step++) {
		const nearest = pickNearest(executions, current, h);
		if (isSame(nearest, current.trials)) return current;
		const next = describeSubset(executions, nearest);
		if (!next) return null;
		current = next;
	}
	return current;
}

function isSame(a: readonly number[], b: readonly number[]): boolean {
	return a.length === b.length && a.every((trial, i) => trial === b[i]);
}

/** The h trials nearest to a center in the metric of a subset, ascending; of equal ones the first. */
function pickNearest(executions: Matrix, { mean, lower }: Found, h: number): number[] {
	const distances = Float64Array.from(executions, (execution) => {
		const whitened = solveLower(lower, subtract(execution, mean));
		return dot(whitened, whitened);
	});
	const limit = distances.slice().sort()[h - 1] ?? Infinity;
	const below: number[] = [];
	const equal: number[] = [];
	distances.forEach((distance, i) => {
		if (distance < limit) below.push(i);
		else if (distance === limit) equal.push(i);
	});
	return [...below, ...equal.slice(0, h - below.length)].sort((a, b) => a - b);
}

function describeSubset(executions: Matrix, trials: readonly number[]): Found | null {
	const rows = trials.map((trial) => row(executions, trial));
	const covariance = computeCovariance(rows);
	const factor = computeCholesky(covariance);
	if (!factor.ok) return null;
	const logDeterminant = logDeterminantFromCholesky(factor.lower);
	return { trials, mean: computeMeanVector(rows), covariance, logDeterminant, lower: factor.lower };
}

import { computeCholesky, solveLower } from '../linear-algebra/cholesky.ts';
import { dot, subtract, type Matrix, type Vector } from '../linear-algebra/vector.ts';
import { computeNormalCdf } from '../statistics/normal.ts';
import {
	computeWilsonInterval,
	computeWilsonLowerBound,
	computeWilsonUpperBound
} from '../statistics/wilson-interval.ts';
import type { ScaledTask } from '../tasks/scaled-task.ts';
import type { Region } from './region-settings.ts';

export interface EscapeStatistics {
	/** Trials looked at: the last of the block. */
	readonly n: number;
	/** Hits outside the region. */
	readonly solved: number;
	/** Share of trials outside the region. */
	readonly outside: number;
	/** (solved / n − stay) / (1 − stay): 0 stayed, 1 all escaped; and from its lower bound. */
	readonly relative: number;
	readonly relativeLow: number;
	/** Upper bound of the share of solved escapes. */
	readonly upper: number;
	/** Share that would hit outside without moving. */
	readonly stay: number;
}

/** Whether an execution lies inside a region. */
export function createRegionTest(region: Pick<Region, 'center' | 'shape'>): (z: Vector) => boolean {
	const factor = computeCholesky(region.shape);
	if (!factor.ok) throw new RangeError('a region needs a positive definite shape');
	return (z) => {
		const whitened = solveLower(factor.lower, subtract(z, region.center));
		return dot(whitened, whitened) <= 1;
	};
}

/**
 * How far a person has moved out of a penalized region.
 *
 * Shapes:  executions (trials × d), scaled, in order.
 * Method:  solved escapes of the last `window` trials with one-sided Wilson bounds at z.
 * Source:  method sheet D0 (Running region), D2 (Escape measures).
 * @throws {RangeError} no trial
 */
export function computeEscape(options: {
	task: ScaledTask;
	executions: Matrix;
	region: Region;
	window: number;
	z: number;
}): EscapeStatistics {
	const { task, region } = options;
	const isInside = createRegionTest(region);
	const looked = options.executions.slice(-options.window);
	const outside = looked.filter((z) => !isInside(z));
	const solved = outside.filter((z) => Math.abs(task.evaluate(z)) <= task.tolerance).length;
	const n = looked.length;
	const share = { successCount: solved, trialCount: n, level: computeNormalCdf(options.z) };
	const relate = (value: number) => (value - region.stay) / (1 - region.stay);
	return {
		n,
		solved,
		outside: outside.length / n,
		relative: relate(solved / n),
		relativeLow: relate(computeWilsonLowerBound(share)),
		upper: computeWilsonUpperBound(share),
		stay: region.stay
	};
}

/** What a region was expected to catch at first, and what it caught. */
export interface CatchCheck {
	readonly expected: number;
	readonly realised: number;
	/** Shares that 95 of 100 blocks of this length show when the expectation is right. */
	readonly low: number;
	readonly high: number;
	readonly agrees: boolean;
}

/**
 * Compares the realised catch of a region with the share it was placed for.
 *
 * Shapes:  executions (trials × d), scaled.
 * Method:  Wilson interval of the expected share. Source: method sheet D4 (log).
 * @throws {RangeError} no trial
 */
export function checkCatch(region: Region, executions: Matrix): CatchCheck {
	const expected = region.catch ?? region.share;
	const realised = executions.filter(createRegionTest(region)).length / executions.length;
	const { low, high } = computeCatchInterval(expected, executions.length);
	return { expected, realised, low, high, agrees: low <= realised && realised <= high };
}

/** 95 % Wilson interval of an expected share over a count of trials. */
export function computeCatchInterval(
	expected: number,
	trialCount: number
): { low: number; high: number } {
	const { lower, upper } = computeWilsonInterval({
		successCount: expected * trialCount,
		...{ trialCount, level: 0.95 }
	});
	return { low: lower, high: upper };
}

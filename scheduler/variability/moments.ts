import { crossProduct, scaleMatrix } from '../linear-algebra/matrix.ts';
import {
	column,
	entry,
	row,
	subtract,
	type Matrix,
	type Vector
} from '../linear-algebra/vector.ts';

/** Mean of a list. @throws {RangeError} an empty list */
export function computeMean(values: Vector): number {
	if (values.length === 0) throw new RangeError('computeMean requires at least one value');
	return values.reduce((sum, value) => sum + value, 0) / values.length;
}

/** SD of a list, divisor n − 1. @throws {RangeError} fewer than two values */
export function computeStandardDeviation(values: Vector): number {
	return Math.sqrt(computeVariance(values));
}

/** Variance of a list, divisor n − 1. @throws {RangeError} fewer than two values */
export function computeVariance(values: Vector): number {
	if (values.length < 2) throw new RangeError('computeVariance requires at least two values');
	const mean = computeMean(values);
	return values.reduce((sum, value) => sum + (value - mean) ** 2, 0) / (values.length - 1);
}

/** Median of a list; the mean of the middle two when their count is even. */
export function computeMedian(values: Vector): number {
	if (values.length === 0) throw new RangeError('computeMedian requires at least one value');
	const sorted = [...values].sort((a, b) => a - b);
	const half = Math.floor(sorted.length / 2);
	const upper = entry(sorted, half);
	return sorted.length % 2 === 1 ? upper : (entry(sorted, half - 1) + upper) / 2;
}

/**
 * Mean of each execution variable over trials.
 *
 * Shapes:  executions (trials × axes), trials >= 1; result (axes).
 * @throws {RangeError} no trial
 */
export function computeMeanVector(executions: Matrix): number[] {
	return row(executions, 0).map((_, axis) => computeMean(column(executions, axis)));
}

/** Each execution less the mean of all. */
export function centerExecutions(executions: Matrix): number[][] {
	const mean = computeMeanVector(executions);
	return executions.map((execution) => subtract(execution, mean));
}

/**
 * Sample covariance of repeated executions: how one participant's trials scatter and co-vary.
 *
 * Shapes:  executions (trials × axes), trials >= 2; result (axes × axes), symmetric, row-major.
 * Units:   axis i in unit u_i -> entry (i, j) in u_i·u_j. Missing trials are removed by the caller.
 * Method:  two-pass, divisor trials − 1 (unbiased). Cost O(trials · axes²).
 * Source:  method sheet B1; tests/reference/variability.test.ts (R 4.2 cov()).
 * Accuracy: relative error <= 1e-12 on the reference set.
 * @throws {RangeError} fewer than two trials, or rows of unequal length
 * @example computeCovariance([[0, 0], [2, 2]]) // [[2, 2], [2, 2]]
 */
export function computeCovariance(executions: Matrix): number[][] {
	if (executions.length < 2) throw new RangeError('computeCovariance requires at least two trials');
	return scaleMatrix(crossProduct(centerExecutions(executions)), 1 / (executions.length - 1));
}

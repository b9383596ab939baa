import { cell, column, dot, entry, type Matrix, type Vector } from './vector.ts';

/** a·A. */
export function scaleMatrix(A: Matrix, a: number): number[][] {
	return A.map((values) => values.map((value) => value * a));
}

/** A + B. */
export function addMatrices(A: Matrix, B: Matrix): number[][] {
	return A.map((values, i) => values.map((value, j) => value + cell(B, i, j)));
}

/** A·B. */
export function multiplyMatrices(A: Matrix, B: Matrix): number[][] {
	const columns = Array.from({ length: B[0]?.length ?? 0 }, (_, j) => column(B, j));
	return A.map((values) => columns.map((other) => dot(values, other)));
}

/** Aᵀ. */
export function transpose(A: Matrix): number[][] {
	return Array.from({ length: A[0]?.length ?? 0 }, (_, j) => column(A, j));
}

/** Aᵀ·A: sums of squares and products of the columns. */
export function crossProduct(A: Matrix): number[][] {
	const columns = transpose(A);
	return columns.map((left) => columns.map((right) => dot(left, right)));
}

/** The matrix with v on its diagonal. */
export function diagonal(v: Vector): number[][] {
	return v.map((value, i) => v.map((_, j) => (i === j ? value : 0)));
}

/** A weighted sum of matrices of one shape. */
export function combineMatrices(matrices: readonly Matrix[], weights: Vector): number[][] {
	const [first, ...others] = matrices;
	if (first === undefined) throw new RangeError('combineMatrices requires at least one matrix');
	return others.reduce<number[][]>(
		(sum, other, i) => addMatrices(sum, scaleMatrix(other, entry(weights, i + 1))),
		scaleMatrix(first, entry(weights, 0))
	);
}

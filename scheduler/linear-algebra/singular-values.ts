import { Matrix as DenseMatrix, SingularValueDecomposition } from 'ml-matrix';
import type { Matrix } from './vector.ts';

/**
 * Singular values, largest first.
 *
 * Shapes:  A (r × d); min(r, d) values.
 * Method:  package ml-matrix (bidiagonal QR); small values keep an absolute error of about 1e-16 of the
 *          largest, which the root of eigenvalues of A·Aᵀ would not.
 * Accuracy: 1e-9, case arm-singular.
 * @throws {RangeError} a number that is not finite
 */
export function computeSingularValues(A: Matrix): number[] {
	if (!A.every((values) => values.every(Number.isFinite)))
		throw new RangeError('computeSingularValues requires finite numbers');
	const dense = new DenseMatrix(A.map((values) => [...values]));
	return new SingularValueDecomposition(dense, {
		computeLeftSingularVectors: false,
		computeRightSingularVectors: false,
		autoTranspose: true
	}).diagonal.slice(0, Math.min(dense.rows, dense.columns));
}

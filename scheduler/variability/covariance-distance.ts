import {
	computeCholesky,
	logDeterminantFromCholesky,
	whitenMatrix
} from '../linear-algebra/cholesky.ts';
import { computeSymmetricEigen } from '../linear-algebra/symmetric-eigen.ts';
import { applyToEigenvalues } from '../linear-algebra/symmetric-function.ts';
import { norm, subtract, type Matrix } from '../linear-algebra/vector.ts';

/**
 * Affine-invariant distance of two covariances: 0 when equal, the same in every unit.
 *
 * Shapes:  A, B (d × d), positive definite.
 * Method:  √Σ ln²λ of A⁻¹·B.
 * Source:  method sheet B5; cases cov-distance-2d, -3d (scipy eigvalsh). Accuracy: relative 1e-10.
 * @throws {RangeError} a matrix that is not positive definite
 */
export function computeCovarianceDistance(A: Matrix, B: Matrix): number {
	const { values } = computeSymmetricEigen(whitenMatrix(factorOf(A), B));
	if (values.some((value) => value <= 0))
		throw new RangeError('computeCovarianceDistance requires positive definite matrices');
	return Math.sqrt(values.reduce((sum, value) => sum + Math.log(value) ** 2, 0));
}

/**
 * Log-Euclidean distance of two covariances. Unlike the affine-invariant distance it changes with the
 * units of the variables, so give both matrices in scaled coordinates.
 *
 * Shapes:  A, B (d × d), positive definite.
 * Method:  Frobenius norm of log A − log B.
 * Source:  method sheet B5; cases cov-distance-2d, -3d (scipy logm). Accuracy: relative 1e-10.
 * @throws {RangeError} a matrix that is not positive definite
 */
export function computeLogEuclideanDistance(A: Matrix, B: Matrix): number {
	const [logA, logB] = [logarithmOf(A), logarithmOf(B)];
	return norm(subtract(logA.flat(), logB.flat()));
}

function logarithmOf(A: Matrix): number[][] {
	factorOf(A);
	return applyToEigenvalues(A, Math.log);
}

/** ½·ln(|B| / |A|): by how much the cloud B is larger than A, in log volume. Source: B5. */
export function computeLogVolumeRatio(A: Matrix, B: Matrix): number {
	return (logDeterminantFromCholesky(factorOf(B)) - logDeterminantFromCholesky(factorOf(A))) / 2;
}

function factorOf(A: Matrix): number[][] {
	const factor = computeCholesky(A);
	if (!factor.ok) throw new RangeError('a covariance must be positive definite');
	return factor.lower;
}

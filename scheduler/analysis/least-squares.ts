import { dotOf, orthogonalise, solveUpper, takeAway } from './orthogonal-columns.ts';

export type LeastSquares =
	| {
			ok: true;
			coefficients: number[];
			/** (XᵀX)⁻¹. */
			unscaled: number[][];
			residualSum: number;
			df: number;
			residuals: Float64Array;
	  }
	| { ok: false; reason: 'collinear' | 'too-few-rows' };

/**
 * Ordinary least squares.
 *
 * Shapes:  y (n), columns (p of n); coefficients (p), unscaled covariance (p × p).
 * Method:  orthonormal columns. Source: G. Golub and C. Van Loan, Matrix Computations, 5.3.
 *          simple-statistics' linear regression takes one column only.
 * Accuracy: relative 1e-12; scheduler/analysis/least-squares.test.ts.
 * @throws {RangeError} columns of different lengths
 */
export function fitLeastSquares(
	y: ArrayLike<number>,
	columns: readonly ArrayLike<number>[]
): LeastSquares {
	if (columns.some(({ length }) => length !== y.length))
		throw new RangeError('the columns differ in length');
	const df = y.length - columns.length;
	if (df < 1) return { ok: false, reason: 'too-few-rows' };
	const orthogonal = orthogonalise(columns);
	if (!orthogonal.ok) return { ok: false, reason: 'collinear' };
	const { columns: q, upper } = orthogonal;
	const residuals = Float64Array.from(y);
	const parts = q.map((column) => takeAway(residuals, column));
	q.forEach((column, j) => (parts[j] = (parts[j] ?? 0) + takeAway(residuals, column)));
	const inverse = q.map((_, j) =>
		solveUpper(
			upper,
			q.map((__, i) => (i === j ? 1 : 0))
		)
	);
	const unscaled = upper.map((_, a) =>
		upper.map((__, b) =>
			inverse.reduce((sum, column) => sum + (column[a] ?? 0) * (column[b] ?? 0), 0)
		)
	);
	return {
		...{ ok: true, coefficients: solveUpper(upper, parts), unscaled },
		...{ residualSum: dotOf(residuals, residuals), df, residuals }
	};
}

import { cell, entry, row, type Matrix, type Vector } from './vector.ts';

export type Cholesky = { ok: true; lower: number[][] } | { ok: false; reason: 'not-positive' };

/** A pivot below this share of its diagonal entry is rounding, not information. */
const PIVOT_SHARE_MIN = 1e-15;

/**
 * Lower triangular L with L·Lᵀ = A.
 *
 * Shapes:  A (d × d), symmetric; only the lower triangle is read.
 * Method:  row by row, no pivoting; refuses a pivot that is not above 1e-15 of its diagonal entry.
 * Accuracy: backward stable; the identity is checked in cholesky.test.ts.
 * @example computeCholesky([[4, 2], [2, 2]]) // { ok: true, lower: [[2, 0], [1, 1]] }
 */
export function computeCholesky(A: Matrix): Cholesky {
	const d = A.length;
	const lower = Array.from({ length: d }, () => new Array<number>(d).fill(0));
	for (let i = 0; i < d; i++) {
		const target = lower[i] ?? [];
		for (let j = 0; j < i; j++) target[j] = offDiagonal(A, lower, i, j);
		const pivot = cell(A, i, i) - partialDot(target, target, i);
		if (!(pivot > PIVOT_SHARE_MIN * Math.abs(cell(A, i, i))))
			return { ok: false, reason: 'not-positive' };
		target[i] = Math.sqrt(pivot);
	}
	return { ok: true, lower };
}

function offDiagonal(A: Matrix, lower: Matrix, i: number, j: number): number {
	return (cell(A, i, j) - partialDot(row(lower, i), row(lower, j), j)) / cell(lower, j, j);
}

function partialDot(u: Vector, v: Vector, count: number): number {
	let sum = 0;
	for (let k = 0; k < count; k++) sum += entry(u, k) * entry(v, k);
	return sum;
}

/** y with L·y = b, for a lower triangular L. */
export function solveLower(L: Matrix, b: Vector): number[] {
	const y: number[] = [];
	for (let i = 0; i < L.length; i++)
		y.push((entry(b, i) - partialDot(row(L, i), y, i)) / cell(L, i, i));
	return y;
}

/** x with Lᵀ·x = y, for a lower triangular L. */
export function solveLowerTransposed(L: Matrix, y: Vector): number[] {
	const d = L.length;
	const x = new Array<number>(d).fill(0);
	for (let i = d - 1; i >= 0; i--) {
		let sum = entry(y, i);
		for (let k = i + 1; k < d; k++) sum -= cell(L, k, i) * entry(x, k);
		x[i] = sum / cell(L, i, i);
	}
	return x;
}

/** x with A·x = b, where A = L·Lᵀ. */
export function solveWithCholesky(L: Matrix, b: Vector): number[] {
	return solveLowerTransposed(L, solveLower(L, b));
}

/** L⁻¹·B·L⁻ᵀ: the symmetric matrix B seen in the coordinates in which L·Lᵀ is the unit matrix. */
export function whitenMatrix(L: Matrix, B: Matrix): number[][] {
	const half = B.map((values) => solveLower(L, values));
	const turned = half.map((_, j) => half.map((values) => entry(values, j)));
	return turned.map((values) => solveLower(L, values));
}

/** det A, where A = L·Lᵀ. */
export function determinantFromCholesky(L: Matrix): number {
	return L.reduce((product, values, i) => product * entry(values, i) ** 2, 1);
}

/** ln det A, where A = L·Lᵀ; does not overflow. */
export function logDeterminantFromCholesky(L: Matrix): number {
	return L.reduce((sum, values, i) => sum + 2 * Math.log(entry(values, i)), 0);
}

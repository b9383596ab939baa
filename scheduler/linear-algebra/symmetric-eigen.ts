import { cell, entry, type Matrix } from './vector.ts';

export interface SymmetricEigen {
	/** Ascending. */
	readonly values: readonly number[];
	/** vectors[i] belongs to values[i]; unit length, sign: largest component positive. */
	readonly vectors: readonly (readonly number[])[];
}

const SWEEPS_MAX = 60;

/**
 * Eigenvalues and eigenvectors of a small symmetric matrix.
 *
 * Shapes:  A (d × d), symmetric; values (d) ascending, vectors (d × d), one a row.
 * Method:  cyclic Jacobi rotations; only +, -, ·, / and square root, so the same on every machine.
 * Source:  Golub & Van Loan, Matrix Computations, section 8.5.
 * Accuracy: absolute error about 1e-15 of the largest value; the identity A·v = λ·v is a property test.
 * @throws {RangeError} A is not square or holds a number that is not finite
 * @example computeSymmetricEigen([[2, 1], [1, 2]]).values // [1, 3]
 */
export function computeSymmetricEigen(A: Matrix): SymmetricEigen {
	requireFiniteSquare(A);
	const work = A.map((values) => [...values]);
	const axes = work.map((_, i) => work.map((_row, j) => (i === j ? 1 : 0)));
	for (let sweep = 0; sweep < SWEEPS_MAX; sweep++) if (!rotateAll(work, axes)) break;
	const order = work
		.map((values, i) => ({ value: entry(values, i), i }))
		.sort((a, b) => a.value - b.value || a.i - b.i);
	return {
		values: order.map(({ value }) => value),
		vectors: order.map(({ i }) => orientAxis(axes.map((values) => entry(values, i))))
	};
}

/** One sweep over all pairs; says whether anything was left to rotate. */
function rotateAll(work: number[][], axes: number[][]): boolean {
	let rotated = false;
	for (let p = 0; p < work.length; p++)
		for (let q = p + 1; q < work.length; q++) rotated = rotatePair(work, axes, p, q) || rotated;
	return rotated;
}

function rotatePair(work: number[][], axes: number[][], p: number, q: number): boolean {
	const off = cell(work, p, q);
	const [app, aqq] = [cell(work, p, p), cell(work, q, q)];
	if (off === 0 || Math.abs(off) < 1e-18 * Math.sqrt(Math.abs(app * aqq))) {
		setPair(work, p, q, 0);
		return false;
	}
	const half = (aqq - app) / (2 * off);
	const t = (half >= 0 ? 1 : -1) / (Math.abs(half) + Math.sqrt(half * half + 1));
	const c = 1 / Math.sqrt(t * t + 1);
	for (let k = 0; k < work.length; k++)
		if (k !== p && k !== q) {
			const [akp, akq] = [cell(work, k, p), cell(work, k, q)];
			setPair(work, k, p, c * akp - c * t * akq);
			setPair(work, k, q, c * t * akp + c * akq);
		}
	setCell(work, p, p, app - t * off);
	setCell(work, q, q, aqq + t * off);
	setPair(work, p, q, 0);
	rotateAxes(axes, p, q, c, c * t);
	return true;
}

function rotateAxes(axes: number[][], p: number, q: number, c: number, s: number): void {
	for (const values of axes) {
		const [vp, vq] = [entry(values, p), entry(values, q)];
		values[p] = c * vp - s * vq;
		values[q] = s * vp + c * vq;
	}
}

function setPair(work: number[][], i: number, j: number, value: number): void {
	setCell(work, i, j, value);
	setCell(work, j, i, value);
}

function setCell(work: number[][], i: number, j: number, value: number): void {
	const values = work[i];
	if (values === undefined) throw new RangeError(`row ${i} of ${work.length}`);
	values[j] = value;
}

function orientAxis(axis: number[]): number[] {
	const largest = axis.reduce((best, x) => (Math.abs(x) > Math.abs(best) + 1e-12 ? x : best), 0);
	return largest < 0 ? axis.map((x) => -x) : axis;
}

function requireFiniteSquare(A: Matrix): void {
	if (A.some((values) => values.length !== A.length || !values.every(Number.isFinite)))
		throw new RangeError('computeSymmetricEigen requires a square matrix of finite numbers');
}

/** Rows of numbers. Symbols in this folder are named in each docstring. */
export type Vector = readonly number[];
/** Row-major, rectangular. */
export type Matrix = readonly Vector[];

/**
 * Entry i of v.
 * @throws {RangeError} there is no such entry
 */
export function entry(v: Vector, i: number): number {
	const value = v[i];
	if (value === undefined) throw new RangeError(`entry ${i} of a vector of length ${v.length}`);
	return value;
}

/**
 * Row i of the matrix A.
 * @throws {RangeError} there is no such row
 */
export function row(A: Matrix, i: number): Vector {
	const values = A[i];
	if (values === undefined) throw new RangeError(`row ${i} of a matrix of ${A.length} rows`);
	return values;
}

/** Entry (i, j) of the matrix A. */
export function cell(A: Matrix, i: number, j: number): number {
	return entry(row(A, i), j);
}

/** Column j of A. */
export function column(A: Matrix, j: number): number[] {
	return A.map((values) => entry(values, j));
}

/** Scalar product of u and v. */
export function dot(u: Vector, v: Vector): number {
	requireEqualLength(u, v);
	let sum = 0;
	for (let i = 0; i < u.length; i++) sum += entry(u, i) * entry(v, i);
	return sum;
}

/** u + v. */
export function add(u: Vector, v: Vector): number[] {
	requireEqualLength(u, v);
	return u.map((value, i) => value + entry(v, i));
}

/** u - v. */
export function subtract(u: Vector, v: Vector): number[] {
	requireEqualLength(u, v);
	return u.map((value, i) => value - entry(v, i));
}

/** a·v. */
export function scale(v: Vector, a: number): number[] {
	return v.map((value) => value * a);
}

/** Euclidean length of v. */
export function norm(v: Vector): number {
	return Math.sqrt(dot(v, v));
}

/** A·v. */
export function multiplyVector(A: Matrix, v: Vector): number[] {
	return A.map((values) => dot(values, v));
}

/** vᵀ·A·v. */
export function quadraticForm(A: Matrix, v: Vector): number {
	return dot(v, multiplyVector(A, v));
}

function requireEqualLength(u: Vector, v: Vector): void {
	if (u.length !== v.length)
		throw new RangeError(`vectors of lengths ${u.length} and ${v.length} cannot be combined`);
}

/** X = Q·R with orthonormal columns of Q and upper triangular R. */
export type OrthogonalColumns =
	| {
			ok: true;
			/** p columns of n values. */
			columns: Float64Array[];
			/** R, row-major p × p. */
			upper: number[][];
	  }
	| {
			ok: false;
			reason: 'collinear';
			/** Which column the ones before it already give. */ column: number;
	  };

/** A column whose part outside the others is below this share of it counts as given by them. */
const SHARE_MIN = 1e-9;

/**
 * Orthonormal columns that span the same space as those given.
 *
 * Shapes:  columns (p of n values), Q (p of n values), R (p × p).
 * Method:  modified Gram-Schmidt, each column twice, which is as good as Householder's reflections.
 * Source:  L. Giraud et al., Numer Math 101 (2005). ml-matrix's QR is not used: the columns are kept
 *          for the sums of a mixed model, and it would copy them row by row.
 * Accuracy: orthogonal to about 1e-15; scheduler/analysis/least-squares.test.ts.
 * @throws {RangeError} there is no column, or they differ in length
 */
export function orthogonalise(given: readonly ArrayLike<number>[]): OrthogonalColumns {
	const rowCount = given[0]?.length;
	if (rowCount === undefined) throw new RangeError('there must be at least one column');
	if (given.some(({ length }) => length !== rowCount))
		throw new RangeError('the columns differ in length');
	const upper = given.map(() => given.map(() => 0));
	const columns: Float64Array[] = [];
	for (const [j, values] of given.entries()) {
		const column = Float64Array.from(values);
		const whole = lengthOf(column);
		for (let round = 0; round < 2; round += 1)
			columns.forEach((other, i) => {
				const part = takeAway(column, other);
				const row = upper[i];
				if (row) row[j] = (row[j] ?? 0) + part;
			});
		const left = lengthOf(column);
		if (!(left > SHARE_MIN * whole)) return { ok: false, reason: 'collinear', column: j };
		for (let i = 0; i < column.length; i += 1) column[i] = (column[i] ?? 0) / left;
		const row = upper[j];
		if (row) row[j] = left;
		columns.push(column);
	}
	return { ok: true, columns, upper };
}

/** Takes away what `column` shares with a unit column, and says how much that was. */
export function takeAway(column: Float64Array, unit: Float64Array): number {
	const part = dotOf(column, unit);
	for (let i = 0; i < column.length; i += 1) column[i] = (column[i] ?? 0) - part * (unit[i] ?? 0);
	return part;
}

export function dotOf(a: Float64Array, b: Float64Array): number {
	let sum = 0;
	for (let i = 0; i < a.length; i += 1) sum += (a[i] ?? 0) * (b[i] ?? 0);
	return sum;
}

function lengthOf(column: Float64Array): number {
	return Math.sqrt(dotOf(column, column));
}

/** x with R·x = b, for an upper triangular R. */
export function solveUpper(upper: readonly (readonly number[])[], b: readonly number[]): number[] {
	const x = b.map(() => 0);
	for (let i = b.length - 1; i >= 0; i -= 1) {
		let sum = b[i] ?? 0;
		for (let k = i + 1; k < b.length; k += 1) sum -= (upper[i]?.[k] ?? 0) * (x[k] ?? 0);
		x[i] = sum / (upper[i]?.[i] ?? Number.NaN);
	}
	return x;
}

/** x with Rᵀ·x = b, for an upper triangular R. */
export function solveUpperTransposed(
	upper: readonly (readonly number[])[],
	b: readonly number[]
): number[] {
	const x = b.map(() => 0);
	for (let i = 0; i < b.length; i += 1) {
		let sum = b[i] ?? 0;
		for (let k = 0; k < i; k += 1) sum -= (upper[k]?.[i] ?? 0) * (x[k] ?? 0);
		x[i] = sum / (upper[i]?.[i] ?? Number.NaN);
	}
	return x;
}

import { diagonal } from './matrix.ts';
import { computeNullBasis } from './null-basis.ts';
import { dot, norm, row, scale, subtract, type Matrix, type Vector } from './vector.ts';

export interface RowSpace {
	/** Orthonormal rows that span the rows of J; their count is the rank of J. */
	readonly basis: readonly (readonly number[])[];
	/** Orthonormal rows that span what J does not see (its null space). */
	readonly complement: readonly (readonly number[])[];
}

/** A row that keeps less than this share of the longest row is seen as a mix of the others. */
const RANK_SHARE_MIN = 1e-10;

/**
 * Splits the space of a Jacobian into the directions it sees and those it does not.
 *
 * Shapes:  J (r × d); basis (rank × d), complement (d − rank × d).
 * Method:  Gram-Schmidt with the longest rest first, each projection done twice; rows that depend on
 *          others are passed over. The complement by null-basis.ts.
 * Source:  Golub & Van Loan, Matrix Computations, section 5.2.
 * Accuracy: J·complementᵀ = 0 and unit products to 1e-14; row-space.test.ts.
 * @throws {RangeError} no row, rows of unequal length or a number that is not finite
 */
export function splitRowSpace(J: Matrix): RowSpace {
	const width = row(J, 0).length;
	if (J.some((values) => values.length !== width || !values.every(Number.isFinite)))
		throw new RangeError('splitRowSpace requires rows of finite numbers of one length');
	const longest = Math.max(...J.map(norm));
	const basis = orthonormalise(J, RANK_SHARE_MIN * longest);
	const complement = basis.length > 0 ? (computeNullBasis(basis) ?? []) : listAxes(width);
	return { basis, complement };
}

/** v less its parts along orthonormal directions. */
export function removeDirections(v: Vector, directions: Matrix): number[] {
	return directions.reduce<number[]>(
		(rest, direction) => subtract(rest, scale(direction, dot(rest, direction))),
		[...v]
	);
}

function listAxes(d: number): number[][] {
	return diagonal(new Array<number>(d).fill(1));
}

function orthonormalise(rows: Matrix, lengthMin: number): number[][] {
	const found: number[][] = [];
	let rests = rows.map((values) => [...values]);
	while (found.length < rows.length) {
		const longest = rests.reduce((best, rest) => (norm(rest) > norm(best) ? rest : best), []);
		if (!(norm(longest) > lengthMin)) break;
		const clean = removeDirections(longest, found);
		const direction = scale(clean, 1 / norm(clean));
		found.push(direction);
		rests = rests.map((rest) => removeDirections(rest, [direction]));
	}
	return found;
}

import { dot, norm, scale, subtract, type Matrix, type Vector } from './vector.ts';

/** A row whose part that the rows before it do not explain is shorter than this share depends on them. */
const DEPENDENT_SHARE = 1e-12;

/**
 * An orthonormal basis of the directions that a matrix sends to 0.
 *
 * Shapes:  A (r × d), r ≤ d; basis (d − r) rows of d; null when the rows depend on each other.
 * Method:  rows made orthonormal (Gram and Schmidt, twice), then completed with the axes, the one least
 *          explained first.
 * Source:  Golub & Van Loan, Matrix Computations, section 5.2. Accuracy: A·v below 1e-14·|A| (property
 *          test in linear-algebra.property.test.ts).
 */
export function computeNullBasis(A: Matrix): number[][] | null {
	const d = A[0]?.length ?? 0;
	const span: number[][] = [];
	for (const values of A) {
		const length = norm(values);
		const rest = removeParts(values, span);
		if (!(norm(rest) > DEPENDENT_SHARE * length)) return null;
		span.push(scale(rest, 1 / norm(rest)));
	}
	const basis: number[][] = [];
	while (span.length < d) {
		const candidates = Array.from({ length: d }, (_, axis) =>
			removeParts(
				Array.from({ length: d }, (_value, i) => (i === axis ? 1 : 0)),
				span
			)
		);
		const best = candidates.reduce((a, b) => (norm(b) > norm(a) + 1e-12 ? b : a));
		const unit = scale(best, 1 / norm(best));
		span.push(unit);
		basis.push(unit);
	}
	return basis;
}

/** What is left of v without its parts along unit vectors; twice, for rounding. */
function removeParts(v: Vector, span: Matrix): number[] {
	const once = (u: Vector) =>
		span.reduce<number[]>((rest, axis) => subtract(rest, scale(axis, dot(rest, axis))), [...u]);
	return once(once(v));
}

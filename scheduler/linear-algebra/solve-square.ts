import { entry, type Matrix, type Vector } from './vector.ts';

/**
 * The solution of A·x = b for a small square matrix; null when A is singular.
 *
 * Shapes:  A (n × n), b (n).
 * Method:  Gauss with the largest pivot of each column.
 * Source:  Golub & Van Loan, Matrix Computations, section 3.4. Accuracy: backward stable for small n; the
 *          identity A·x = b is a property test in linear-algebra.property.test.ts.
 */
export function solveSquare(A: Matrix, b: Vector): number[] | null {
	const work = A.map((values, i) => [...values, entry(b, i)]);
	for (let i = 0; i < work.length; i++) {
		const pivot = findPivot(work, i);
		const [top, other] = [work[i], work[pivot]];
		const head = other?.[i] ?? 0;
		if (!top || !other || head === 0 || !Number.isFinite(head)) return null;
		work[pivot] = top;
		work[i] = other.map((value) => value / head);
		work.forEach((values, k) => {
			const factor = entry(values, i);
			if (k !== i && factor !== 0)
				work[k] = values.map((value, j) => value - factor * entry(work[i] ?? [], j));
		});
	}
	return work.map((values) => entry(values, work.length));
}

function findPivot(work: Matrix, column: number): number {
	let best = column;
	for (let k = column + 1; k < work.length; k++)
		if (Math.abs(entry(work[k] ?? [], column)) > Math.abs(entry(work[best] ?? [], column)))
			best = k;
	return best;
}

import { cell, row, type Matrix } from '../linear-algebra/vector.ts';

export interface Assignment {
	/** columnOf[i] is the column that row i gets. */
	readonly columnOf: readonly number[];
	readonly total: number;
}

/**
 * Pairs each row with one column so that the sum of the costs is least.
 *
 * Shapes:  costs (n × n), finite; columnOf (n), each column once.
 * Method:  shortest augmenting paths with row and column prices; cost n³. Own code: no kept package
 *          among the dependencies solves assignments.
 * Source:  Jonker & Volgenant 1987, Computing 38:325; improvement.test.ts (all orders tried).
 * Accuracy: exact up to rounding.
 * @throws {RangeError} costs that are not square or not finite
 * @example solveAssignment([[4, 1], [2, 3]]) // { columnOf: [1, 0], total: 3 }
 */
export function solveAssignment(costs: Matrix): Assignment {
	const n = costs.length;
	if (costs.some((values) => values.length !== n || !values.every(Number.isFinite)))
		throw new RangeError('solveAssignment requires a square matrix of finite costs');
	const prices = { row: new Float64Array(n), column: new Float64Array(n) };
	const rowOf = new Int32Array(n).fill(-1);
	for (let i = 0; i < n; i++) assignRow(costs, i, prices, rowOf);
	const columnOf = new Array<number>(n).fill(0);
	rowOf.forEach((i, j) => (columnOf[i] = j));
	return { columnOf, total: columnOf.reduce((sum, j, i) => sum + cell(costs, i, j), 0) };
}

interface Prices {
	readonly row: Float64Array;
	readonly column: Float64Array;
}

/** Finds the cheapest chain of re-assignments that gives one more row a column, and carries it out. */
function assignRow(costs: Matrix, start: number, prices: Prices, rowOf: Int32Array): void {
	const n = costs.length;
	const reach = new Float64Array(n).fill(Infinity);
	const cameFrom = new Int32Array(n).fill(-1);
	const isDone = new Uint8Array(n);
	let [current, length, last] = [start, 0, -1];
	const path: number[] = [];
	for (;;) {
		const values = row(costs, current);
		let next = -1;
		for (let j = 0; j < n; j++) {
			if (isDone[j]) continue;
			const at = length + (values[j] ?? 0) - at0(prices.row, current) - at0(prices.column, j);
			if (at < at0(reach, j)) {
				reach[j] = at;
				cameFrom[j] = last;
			}
			if (next < 0 || at0(reach, j) < at0(reach, next)) next = j;
		}
		length = at0(reach, next);
		isDone[next] = 1;
		path.push(next);
		last = next;
		if (rowOf[next] === -1) break;
		current = rowOf[next] ?? 0;
	}
	updatePrices({ prices, rowOf, reach, path, length, start });
	for (let j = last; j !== -1;) {
		const before = cameFrom[j] ?? -1;
		rowOf[j] = before === -1 ? start : (rowOf[before] ?? 0);
		j = before;
	}
}

function updatePrices(state: {
	prices: Prices;
	rowOf: Int32Array;
	reach: Float64Array;
	path: readonly number[];
	length: number;
	start: number;
}): void {
	const { prices, rowOf, reach, path, length, start } = state;
	prices.row[start] = at0(prices.row, start) + length;
	for (const j of path.slice(0, -1)) {
		const gap = length - at0(reach, j);
		prices.column[j] = at0(prices.column, j) - gap;
		const i = rowOf[j] ?? 0;
		prices.row[i] = at0(prices.row, i) + gap;
	}
}

function at0(values: Float64Array, i: number): number {
	return values[i] ?? 0;
}

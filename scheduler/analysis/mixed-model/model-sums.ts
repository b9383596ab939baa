import { dotOf, orthogonalise, takeAway } from '../orthogonal-columns.ts';

/** Data of a model with people (or other groups) whose lines differ. */
export type MixedModelData = {
	/** Outcomes, one a row. */
	y: ArrayLike<number>;
	/** Columns of the fixed effects (p of n values), the intercept among them if there is one. */
	fixed: readonly ArrayLike<number>[];
	/** Which group each row belongs to, from 0. */
	group: ArrayLike<number>;
	/** Columns of the random effects: one or two, usually the intercept and a time. */
	random: readonly ArrayLike<number>[];
};

/**
 * Groups with the same design: how many, their common sums, and the sums of their outcomes. All in
 * the coordinates of {@link ModelSums}. Matrices of two random effects as [11, 12, 22]; with one the
 * rest is 0.
 */
export type DesignCell = {
	count: number;
	/** Rows of one group. */
	rowCount: number;
	/** ZᵀZ of one group. */
	g: [number, number, number];
	/** ZᵀX of one group: first p of effect 1, then p of effect 2. */
	zx: Float64Array;
	/** XᵀX of one group, row-major. */
	xx: Float64Array;
	/** Sum of Zᵀy over the groups. */
	zy: [number, number];
	/** Sum of (Zᵀy)(Zᵀy)ᵀ over the groups. */
	zyzy: [number, number, number];
};

/**
 * All a criterion needs to know of the data. Coordinates: the columns of X made orthonormal (X = Q·R),
 * the columns of Z made uncorrelated over all rows (Z' = Z·C), the outcomes less their least-squares
 * fit. None of this changes the model; it keeps digits, and lets one start serve all.
 */
export type ModelSums = {
	rowCount: number;
	p: number;
	q: 1 | 2;
	groupCount: number;
	cells: DesignCell[];
	/** Residual sum of squares of least squares. */
	yy: number;
	/** Coefficients of the least-squares fit in the columns of Q. */
	base: number[];
	/** R. */
	upper: number[][];
	/** C, lower triangular: [11, 21, 22]. */
	spread: [number, number, number];
	/** Sums of each group, for its predicted line. */
	groups: { g: [number, number, number]; zx: Float64Array; zy: [number, number] }[];
};

export type SummedModel =
	| { ok: true; sums: ModelSums }
	| { ok: false; reason: 'collinear' | 'too-few-rows' | 'too-few-groups' | 'no-residual' };

/**
 * Turns rows into the sums of {@link ModelSums}.
 * @throws {RangeError} columns of different lengths, no or too many random columns, or no number
 */
export function sumModel(data: MixedModelData): SummedModel {
	requireData(data);
	const { y, fixed, group, random } = data;
	const n = y.length;
	const p = fixed.length;
	if (n <= p + 1) return { ok: false, reason: 'too-few-rows' };
	const orthogonal = orthogonalise(fixed);
	if (!orthogonal.ok) return { ok: false, reason: 'collinear' };
	const { columns: q, upper } = orthogonal;
	const rest = Float64Array.from(y);
	const total = dotOf(rest, rest);
	const base = q.map((column) => takeAway(rest, column));
	q.forEach((column, j) => (base[j] = (base[j] ?? 0) + takeAway(rest, column)));
	const yy = dotOf(rest, rest);
	if (!(yy > 1e-24 * total)) return { ok: false, reason: 'no-residual' };
	const turned = turnRandom(random, n);
	if (!turned) return { ok: false, reason: 'collinear' };
	const groups = sumGroups({ q, z: turned.z, rest, group });
	if (groups.length < 2 || groups.length >= n) return { ok: false, reason: 'too-few-groups' };
	const sums = {
		...{ rowCount: n, p, q: random.length === 1 ? (1 as const) : (2 as const), yy, base, upper },
		...{ groupCount: groups.length, spread: turned.spread, groups, cells: joinCells(groups) }
	};
	return { ok: true, sums };
}

/** Columns of Z with unit mean square and no correlation, and C; null when they are collinear. */
function turnRandom(random: readonly ArrayLike<number>[], n: number) {
	const [first, second] = random.map((column) => Float64Array.from(column));
	if (!first) return null;
	if (!second) {
		const size = Math.sqrt(dotOf(first, first) / n);
		if (!(size > 0)) return null;
		return {
			z: [first.map((value) => value / size)],
			spread: [1 / size, 0, 0] as [number, number, number]
		};
	}
	const [s11, s12, s22] = [dotOf(first, first), dotOf(first, second), dotOf(second, second)];
	const ratio = s12 / s22;
	const left = (s11 - s12 * ratio) / n;
	if (!(s22 > 0 && left > 1e-18 * (s11 / n))) return null;
	const [c11, c22] = [1 / Math.sqrt(left), 1 / Math.sqrt(s22 / n)];
	const z1 = first.map((value, i) => c11 * (value - ratio * (second[i] ?? 0)));
	const spread: [number, number, number] = [c11, -c11 * ratio, c22];
	return { z: [z1, second.map((value) => c22 * value)], spread };
}

type GroupSums = {
	rowCount: number;
	g: [number, number, number];
	zx: Float64Array;
	xx: Float64Array;
	zy: [number, number];
};

function sumGroups(parts: {
	q: readonly Float64Array[];
	z: readonly Float64Array[];
	rest: Float64Array;
	group: ArrayLike<number>;
}): GroupSums[] {
	const { q, z, rest, group } = parts;
	const p = q.length;
	const [z1, z2] = z;
	const found = new Map<number, GroupSums>();
	const x = new Float64Array(p);
	for (let i = 0; i < rest.length; i += 1) {
		const key = group[i] ?? -1;
		let sums = found.get(key);
		if (!sums) {
			sums = createSums(p);
			found.set(key, sums);
		}
		for (let j = 0; j < p; j += 1) x[j] = q[j]?.[i] ?? 0;
		addRow(sums, x, z1?.[i] ?? 0, z2?.[i] ?? 0, rest[i] ?? 0);
	}
	for (const { xx } of found.values())
		for (let j = 0; j < p; j += 1)
			for (let k = 0; k < j; k += 1) xx[k * p + j] = xx[j * p + k] ?? 0;
	return [...found.values()];
}

function createSums(p: number): GroupSums {
	const [zx, xx] = [new Float64Array(2 * p), new Float64Array(p * p)];
	return { rowCount: 0, g: [0, 0, 0], zx, xx, zy: [0, 0] };
}

/** @param a, b the row's values of both random columns */
function addRow(sums: GroupSums, x: Float64Array, a: number, b: number, y: number): void {
	const { g, zx, xx, zy } = sums;
	const p = x.length;
	sums.rowCount += 1;
	g[0] += a * a;
	g[1] += a * b;
	g[2] += b * b;
	zy[0] += a * y;
	zy[1] += b * y;
	for (let j = 0; j < p; j += 1) {
		const own = x[j] ?? 0;
		zx[j] = (zx[j] ?? 0) + a * own;
		zx[p + j] = (zx[p + j] ?? 0) + b * own;
		for (let k = 0; k <= j; k += 1) xx[j * p + k] = (xx[j * p + k] ?? 0) + own * (x[k] ?? 0);
	}
}

/** Groups with the same sums of design cost as much as one. */
function joinCells(groups: readonly GroupSums[]): DesignCell[] {
	const cells: DesignCell[] = [];
	const known = new Map<number, DesignCell[]>();
	for (const group of groups) {
		const [a, b] = group.zy;
		const key = group.rowCount + group.g[0];
		const alike = known.get(key)?.find((cell) => isSameDesign(cell, group));
		if (alike) {
			addOutcomes(alike, a, b);
			continue;
		}
		const { rowCount, g, zx, xx } = group;
		const cell: DesignCell = {
			...{ count: 1, rowCount, g, zx, xx, zy: [a, b], zyzy: [a * a, a * b, b * b] }
		};
		cells.push(cell);
		known.set(key, [...(known.get(key) ?? []), cell]);
	}
	return cells;
}

function isSameDesign(cell: DesignCell, { rowCount, g, zx }: GroupSums): boolean {
	if (cell.rowCount !== rowCount || cell.g[1] !== g[1] || cell.g[2] !== g[2]) return false;
	for (let j = 0; j < zx.length; j += 1) if (cell.zx[j] !== zx[j]) return false;
	return cell.g[0] === g[0];
}

function addOutcomes(cell: DesignCell, a: number, b: number): void {
	cell.count += 1;
	cell.zy[0] += a;
	cell.zy[1] += b;
	cell.zyzy[0] += a * a;
	cell.zyzy[1] += a * b;
	cell.zyzy[2] += b * b;
}

function requireData({ y, fixed, group, random }: MixedModelData): void {
	if (random.length < 1 || random.length > 2)
		throw new RangeError(`one or two random columns are possible, not ${random.length}`);
	const columns = [y, ...fixed, group, ...random];
	if (columns.some(({ length }) => length !== y.length))
		throw new RangeError('the columns differ in length');
	for (const column of columns)
		for (let i = 0; i < column.length; i += 1)
			if (!Number.isFinite(column[i])) throw new RangeError(`row ${i + 1} holds no number`);
}

import { findRoot } from '../statistics/find-root.ts';
import { computeNormalCdf, computeNormalQuantile } from '../statistics/normal.ts';
import { createLooks, type LookSides } from './sequential-density.ts';
import { computeSpent, type Spending } from './spending.ts';

export type BoundaryOptions = {
	spending: Spending;
	/** Error rate of one side, for instance 0.025 for 5 % two-sided. */
	alphaPerSide: number;
	/** Information at each look as a share of the plan, rising; the last is 1 unless data fell short. */
	information: readonly number[];
	/** 2: symmetric boundaries, `alphaPerSide` in each tail. 1: the upper one only. */
	sides: LookSides;
};

/** One look. */
export type Boundary = {
	/** Share of the planned information. */
	information: number;
	/** Stop when the statistic is at or beyond this; Infinity when nothing may be spent yet. */
	z: number;
	/** One-sided error rate spent at this look, and up to it. */
	spentHere: number;
	spentSoFar: number;
	/** One-sided nominal p value that belongs to z. */
	nominalP: number;
};

/** Beyond this a normal value does not occur in double precision; what is spent there is nothing. */
const Z_MAX = 37;

/**
 * Boundaries of a group-sequential design with error spending.
 *
 * Shapes: spending function and looks in, one boundary a look out. Units: standard normal values.
 * Method: the density of the statistic that has not crossed yet is carried from look to look by
 * numerical integration; each boundary is the root at which the crossing probability is what the
 * spending function allows since the last look. Looks may lie anywhere.
 * Source: P. Armitage, C. McPherson and B. Rowe, JRSS A 132 (1969); K. Lan and D. DeMets, Biometrika
 * 70 (1983).
 * Accuracy: absolute 1e-8 of z; tests/reference/group-sequential.test.ts, cases gs-ld-*.
 * @throws RangeError when information does not rise within 0 to 1 or alpha is not in 0 to 0.5
 * @example computeBoundaries({ spending: { kind: 'obrien-fleming' }, alphaPerSide: 0.025,
 *   information: [0.5, 1], sides: 2 }) // z 2.9626, 1.9686
 */
export function computeBoundaries(options: BoundaryOptions): Boundary[] {
	const { spending, alphaPerSide, information, sides } = options;
	requireInformation(information);
	if (!(alphaPerSide > 0 && alphaPerSide < 0.5))
		throw new RangeError(`alphaPerSide must lie between 0 and 0.5, got ${alphaPerSide}`);
	const looks = createLooks(sides);
	let before = 0;
	return information.map((share) => {
		const spentSoFar = computeSpent(spending, { alpha: alphaPerSide, information: share });
		const spentHere = spentSoFar - before;
		before = spentSoFar;
		const next = looks.prepare(share);
		const z = solveBoundary(spentHere, (c) => next.crossAbove(c));
		next.keepBelow(z);
		return { information: share, z, spentHere, spentSoFar, nominalP: computeNormalCdf(-z) };
	});
}

function solveBoundary(spentHere: number, crossAbove: (z: number) => number): number {
	if (spentHere <= 0 || crossAbove(Z_MAX) >= spentHere) return Infinity;
	const excess = (z: number) => Math.log(crossAbove(z) / spentHere);
	let high = 5;
	while (crossAbove(high) > spentHere) high = Math.min(Z_MAX, high + 4);
	let low = -2;
	while (crossAbove(low) < spentHere) low -= 4;
	const compute = (z: number) => Math.max(-700, excess(z));
	return findRoot({ compute, low, high, tolerance: 1e-12 });
}

/**
 * Boundaries of the classical designs with equal looks, whose shape is fixed: z_k = c (K / k)^shape.
 *
 * Shapes: count of looks in, list of z out. Units: standard normal values.
 * Method: root search on the constant. Source: S. Pocock, Biometrika 64 (1977), shape 0; P. O'Brien
 * and T. Fleming, Biometrics 35 (1979), shape 1/2; shapes between: S. Wang and A. Tsiatis,
 * Biometrics 43 (1987).
 * Accuracy: absolute 1e-8; tests/reference/group-sequential.test.ts (five looks: 2.4132; 2.0401 √(5/k)).
 * @throws RangeError when there is no look or alpha is not in 0 to 0.5
 */
export function computeClassicalBoundaries(options: {
	lookCount: number;
	alphaPerSide: number;
	/** 0: Pocock. 0.5: O'Brien-Fleming. */
	shape: number;
	sides: LookSides;
}): number[] {
	const { lookCount, alphaPerSide, shape, sides } = options;
	if (!Number.isInteger(lookCount) || lookCount < 1)
		throw new RangeError(`lookCount must be a whole number from 1, got ${lookCount}`);
	if (!(alphaPerSide > 0 && alphaPerSide < 0.5))
		throw new RangeError(`alphaPerSide must lie between 0 and 0.5, got ${alphaPerSide}`);
	const information = Array.from({ length: lookCount }, (_, i) => (i + 1) / lookCount);
	const at = (c: number) => information.map((share) => c * share ** -shape);
	const compute = (c: number) =>
		computeCrossings({ z: at(c), information, sides, drift: 0 }).above - alphaPerSide;
	const low = -computeNormalQuantile(alphaPerSide) - 0.5;
	return at(findRoot({ compute, low, high: low + 6, tolerance: 1e-12 }));
}

/**
 * Probability that the boundaries are crossed, above and (two-sided) below, for a true effect.
 *
 * Shapes: z and information of the looks and a drift in, probabilities out. Units: the drift is the
 * expected statistic at full information.
 * Method: as {@link computeBoundaries}. Source: as there.
 * Accuracy: absolute 1e-8; tests/reference/group-sequential.test.ts.
 * @throws RangeError when information does not rise within 0 to 1 or the lists differ in length
 */
export function computeCrossings(options: {
	z: readonly number[];
	information: readonly number[];
	sides: LookSides;
	drift: number;
}): { above: number; below: number; perLook: { above: number; below: number }[] } {
	const { z, information, sides, drift } = options;
	requireInformation(information);
	if (z.length !== information.length)
		throw new RangeError(`${z.length} boundaries for ${information.length} looks`);
	const looks = createLooks(sides, drift);
	const perLook = information.map((share, i) => {
		const next = looks.prepare(share);
		const limit = z[i] ?? Infinity;
		const crossed = { above: next.crossAbove(limit), below: next.crossBelow(limit) };
		next.keepBelow(limit);
		return crossed;
	});
	const total = (side: 'above' | 'below') => perLook.reduce((sum, p) => sum + p[side], 0);
	return { above: total('above'), below: total('below'), perLook };
}

/**
 * How much larger a group-sequential study must be than one with a single look, for the same power.
 *
 * Shapes: boundaries and power in, factor and drift out. Units: none; drift as in
 * {@link computeCrossings}.
 * Method: root search on the drift. Source: C. Jennison and B. Turnbull, Group Sequential Methods
 * (2000), chapter 2: five looks, O'Brien-Fleming, 5 %, power .9: 1.026.
 * Accuracy: relative 1e-7; tests/reference/group-sequential.test.ts.
 * @throws RangeError when the power is not between alpha and 1
 */
export function computeInflation(options: {
	z: readonly number[];
	information: readonly number[];
	sides: LookSides;
	alphaPerSide: number;
	power: number;
}): { factor: number; drift: number } {
	const { alphaPerSide, power, ...design } = options;
	if (!(power > alphaPerSide && power < 1))
		throw new RangeError(`power must lie between ${alphaPerSide} and 1, got ${power}`);
	const compute = (drift: number) => computeCrossings({ ...design, drift }).above - power;
	const fixed = computeNormalQuantile(power) - computeNormalQuantile(alphaPerSide);
	const drift = findRoot({ compute, low: 0, high: fixed + 8, tolerance: 1e-11 });
	return { factor: (drift / fixed) ** 2, drift };
}

function requireInformation(information: readonly number[]): void {
	const rises = information.every((share, i) => share > (information[i - 1] ?? 0) && share <= 1);
	if (information.length === 0 || !rises)
		throw new RangeError('information must rise from above 0 to at most 1');
}

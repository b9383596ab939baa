import { computeCholesky, solveLower, type Cholesky } from '../linear-algebra/cholesky.ts';
import {
	add,
	dot,
	entry,
	multiplyVector,
	subtract,
	type Matrix
} from '../linear-algebra/vector.ts';
import type { EllipsoidShape } from './ellipsoid-separation.ts';

export interface EllipseIntersection {
	readonly firstArea: number;
	readonly secondArea: number;
	readonly area: number;
	/** Part of the first, part of the second, part of both together that the intersection covers. */
	readonly shareOfFirst: number;
	readonly shareOfSecond: number;
	/** Intersection over union: 1 for equal ellipses, 0 for separate ones. */
	readonly jaccard: number;
}

export type EllipseIntersectionResult =
	({ ok: true } & EllipseIntersection) | { ok: false; reason: 'singular-shape' };

const ARCS = 720;
const ROUNDS = 60;
/** Five points of an ellipse fix it: this near at six places, two ellipses are one. */
const EQUAL_DEPTH = 1e-11;
const GOLDEN = (Math.sqrt(5) - 1) / 2;

/** An ellipse as the image of the unit circle: center + L·(cos t, sin t). */
interface Ellipse {
	readonly center: readonly number[];
	readonly lower: Matrix;
}

/**
 * Area that two ellipses have in common.
 *
 * Shapes:  centers (2), shapes (2 × 2), positive definite.
 * Units:   area in the product of the units of both variables; shares have none.
 * Method:  Green's theorem along the arcs of each outline that lie inside the other ellipse; the crossing
 *          points are found by bisection between 720 places and by golden section where two lie close.
 * Source:  method sheet B6; case overlap-ellipse-area (chords, Simpson). Accuracy: 1e-9 of the smaller area.
 * @throws {RangeError} not two variables
 */
export function computeEllipseIntersection(
	first: EllipsoidShape,
	second: EllipsoidShape
): EllipseIntersectionResult {
	if (first.center.length !== 2 || second.center.length !== 2)
		throw new RangeError('computeEllipseIntersection requires two variables');
	const [one, two] = [computeCholesky(first.shape), computeCholesky(second.shape)];
	if (!one.ok || !two.ok) return { ok: false, reason: 'singular-shape' };
	const [a, b] = [ellipseOf(first, one), ellipseOf(second, two)];
	const [firstArea, secondArea] = [areaOf(a), areaOf(b)];
	const found = areEqual(a, b) ? firstArea : sumArcs(a, b, a.center) + sumArcs(b, a, a.center);
	const area = Math.min(firstArea, secondArea, Math.max(0, found));
	return {
		ok: true,
		...{ firstArea, secondArea, area },
		shareOfFirst: area / firstArea,
		shareOfSecond: area / secondArea,
		jaccard: area / (firstArea + secondArea - area)
	};
}

function ellipseOf({ center }: EllipsoidShape, { lower }: Cholesky & { ok: true }): Ellipse {
	return { center: [...center], lower };
}

function areaOf({ lower }: Ellipse): number {
	return Math.PI * entry(lower[0] ?? [], 0) * entry(lower[1] ?? [], 1);
}

function pointAt({ center, lower }: Ellipse, t: number): number[] {
	return add(center, multiplyVector(lower, [Math.cos(t), Math.sin(t)]));
}

/** How far each point of an outline lies outside another ellipse; below 0 inside it. */
function depthIn(outline: Ellipse, other: Ellipse): (t: number) => number {
	return (t) => {
		const whitened = solveLower(other.lower, subtract(pointAt(outline, t), other.center));
		return dot(whitened, whitened) - 1;
	};
}

function areEqual(a: Ellipse, b: Ellipse): boolean {
	const depth = depthIn(a, b);
	return [0, 1, 2, 3, 4, 5].every((t) => Math.abs(depth(t)) < EQUAL_DEPTH);
}

/** Part of the area of the intersection that the arcs of one outline inside the other ellipse add. */
function sumArcs(outline: Ellipse, other: Ellipse, origin: readonly number[]): number {
	const depth = depthIn(outline, other);
	const cuts = findCrossings(depth);
	if (cuts.length === 0) return depth(0) < 0 ? areaOf(outline) : 0;
	return cuts.reduce((sum, from, i) => {
		const to = cuts[i + 1] ?? entry(cuts, 0) + 2 * Math.PI;
		return depth((from + to) / 2) < 0 ? sum + arcArea(outline, origin, from, to) : sum;
	}, 0);
}

/** ½∮(x·dy − y·dx) over one arc, seen from one origin for all arcs so that they close. */
function arcArea(outline: Ellipse, origin: readonly number[], from: number, to: number): number {
	const [x = 0, y = 0] = subtract(outline.center, origin);
	const [[a = 0] = [], [b = 0, c = 0] = []] = outline.lower;
	const sine = Math.sin(to) - Math.sin(from);
	const cosine = Math.cos(to) - Math.cos(from);
	// x·dy − y·dx with x(t) = x + a·cos t, y(t) = y + b·cos t + c·sin t.
	return (a * c * (to - from) + x * (b * cosine + c * sine) - y * a * cosine) / 2;
}

/** Angles at which the outline crosses the other one, ascending. */
function findCrossings(depth: (t: number) => number): number[] {
	const places = Array.from({ length: ARCS + 2 }, (_, i) => (2 * Math.PI * i) / ARCS);
	const values = places.map(depth);
	const cuts: number[] = [];
	for (let i = 1; i <= ARCS; i++) {
		const [left, here, right] = [entry(values, i - 1), entry(values, i), entry(values, i + 1)];
		const [from, at, to] = [entry(places, i - 1), entry(places, i), entry(places, i + 1)];
		if (left < 0 !== here < 0) cuts.push(bisect(depth, from, at));
		else if (here < 0 === right < 0 && isTurn(left, here, right)) {
			const turn = findTurn(depth, from, to, here < 0 ? 1 : -1);
			if (depth(turn) < 0 !== here < 0)
				cuts.push(bisect(depth, from, turn), bisect(depth, turn, to));
		}
	}
	return cuts.sort((a, b) => a - b);
}

/** Whether the value at the middle comes nearest to 0 of the three. */
function isTurn(left: number, here: number, right: number): boolean {
	return Math.abs(here) <= Math.abs(left) && Math.abs(here) <= Math.abs(right);
}

function bisect(depth: (t: number) => number, from: number, to: number): number {
	let [low, high] = [from, to];
	const isLow = depth(low) < 0;
	for (let round = 0; round < ROUNDS; round++) {
		const middle = (low + high) / 2;
		if (depth(middle) < 0 === isLow) low = middle;
		else high = middle;
	}
	return (low + high) / 2;
}

/** Place where sign · depth is largest. */
function findTurn(depth: (t: number) => number, from: number, to: number, sign: number): number {
	let [low, high] = [from, to];
	for (let round = 0; round < ROUNDS; round++) {
		const reach = GOLDEN * (high - low);
		if (sign * depth(high - reach) > sign * depth(low + reach)) high = low + reach;
		else low = high - reach;
	}
	return (low + high) / 2;
}

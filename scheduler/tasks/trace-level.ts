import { joinSegments, type Crossing, type PlanePoint } from './join-segments.ts';
import type { ResultMap } from './result-map.ts';

export interface LevelTrace {
	/** One list of points [x, y] a branch; a closed branch ends where it began. */
	readonly lines: PlanePoint[][];
	/**
	 * 1 for each cell of the map, rows along x from the bottom, in which the result passes the level by a
	 * jump, not through it; (nx − 1) × (ny − 1).
	 */
	readonly jumps: Uint8Array;
}

/** Rounds of false position on an edge that the level crosses. */
const ROUNDS = 6;
/** Part of the difference along the edge that may be left: more is a jump. */
const REST_SHARE = 0.02;

/**
 * Where the one result of a map has a value, as polylines for pictures; jumps across it are left out.
 *
 * Units:   those of the task.
 * Method:  marching squares on the map; with `evaluate` each crossing is found on its edge by six rounds of
 *          false position and told from a jump; without it crossings are interpolated.
 * Source:  method sheet A7; result-map.test.ts.
 * @param skipped cells to be left out, such as those in which the sign is known to jump
 * @throws {RangeError} a map of several results, which has no change of sign to be followed
 */
export function traceLevel(
	map: ResultMap,
	level: number,
	evaluate?: (point: PlanePoint) => number,
	skipped?: Uint8Array
): LevelTrace {
	const [values] = map.results;
	if (!values || map.results.length > 1)
		throw new RangeError('traceLevel requires a map of one result');
	const { nx, ny } = map;
	const jumps = new Uint8Array((nx - 1) * (ny - 1));
	const cutEdge = createEdgeCutter(map, values, level, evaluate);
	const segments: [Crossing, Crossing][] = [];
	for (let j = 0; j + 1 < ny; j++)
		for (let i = 0; i + 1 < nx; i++) {
			const corner = j * nx + i;
			if (skipped?.[j * (nx - 1) + i] || !passesLevel(values, level, corner, nx)) continue;
			const [a, b, c, d] = [corner, corner + 1, corner + nx + 1, corner + nx];
			const sides = [cutEdge(a, b), cutEdge(b, c), cutEdge(d, c), cutEdge(a, d)];
			if (sides.includes('jump')) jumps[j * (nx - 1) + i] = 1;
			const found = sides.filter((side) => side !== null && side !== 'jump');
			segments.push(...pairCrossings(found, isCenterLike(values, [a, b, c, d], level)));
		}
	return { lines: joinSegments(segments), jumps };
}

/** Whether the corners of a cell lie on both sides of the level; most cells are done with here. */
function passesLevel(values: Float64Array, level: number, corner: number, nx: number): boolean {
	const isLow = (values[corner] ?? 0) < level;
	return (
		(values[corner + 1] ?? 0) < level !== isLow ||
		(values[corner + nx] ?? 0) < level !== isLow ||
		(values[corner + nx + 1] ?? 0) < level !== isLow
	);
}

/** Four crossings are a saddle: joined by the sign in the middle of the cell. */
function pairCrossings(
	[a, b, c, d]: readonly Crossing[],
	isCenterLikeFirst: boolean
): [Crossing, Crossing][] {
	if (!a || !b) return [];
	if (!c || !d) return [[a, b]];
	return isCenterLikeFirst
		? [
				[a, b],
				[c, d]
			]
		: [
				[d, a],
				[b, c]
			];
}

function isCenterLike(values: Float64Array, corners: readonly number[], level: number): boolean {
	const at = (k: number) => (values[corners[k] ?? 0] ?? Number.NaN) - level;
	const middle = (at(0) + at(1) + at(2) + at(3)) / 4;
	return middle < 0 === at(0) < 0;
}

/** Cuts each edge once, though two cells share it. */
function createEdgeCutter(
	{ window, nx, ny }: ResultMap,
	values: Float64Array,
	level: number,
	evaluate?: (point: PlanePoint) => number
) {
	const known = new Map<number, Crossing | 'jump' | null>();
	const stepX = (window.x[1] - window.x[0]) / (nx - 1);
	const stepY = (window.y[1] - window.y[0]) / (ny - 1);
	const placeOf = (k: number): PlanePoint => [
		window.x[0] + (k % nx) * stepX,
		window.y[0] + Math.floor(k / nx) * stepY
	];
	const cut = (from: number, to: number): Crossing | 'jump' | null => {
		const low = (values[from] ?? Number.NaN) - level;
		const high = (values[to] ?? Number.NaN) - level;
		if (!Number.isFinite(low) || !Number.isFinite(high) || low < 0 === high < 0) return null;
		const along = (share: number): PlanePoint => {
			const [a, b] = [placeOf(from), placeOf(to)];
			return [a[0] + share * (b[0] - a[0]), a[1] + share * (b[1] - a[1])];
		};
		const share = evaluate
			? findShare(low, high, (at) => evaluate(along(at)) - level)
			: low / (low - high);
		return share === null ? 'jump' : { key: `${from},${to}`, point: along(share) };
	};
	return (from: number, to: number) => {
		const key = from * 2 + (to === from + 1 ? 0 : 1);
		const before = known.get(key);
		if (before !== undefined) return before;
		const found = cut(from, to);
		known.set(key, found);
		return found;
	};
}

/** Share of the way at which a value passes 0, by false position with halved ends; null for a jump. */
function findShare(low: number, high: number, at: (share: number) => number): number | null {
	const span = Math.abs(high - low);
	let [a, b] = [0, 1];
	let [fa, fb] = [low, high];
	for (let round = 0; round < ROUNDS; round++) {
		const share = a + ((b - a) * fa) / (fa - fb);
		const value = at(share);
		if (!Number.isFinite(value)) return null;
		if (Math.abs(value) <= REST_SHARE * span * (b - a)) return share;
		if (value < 0 === fa < 0) {
			[a, fa] = [share, value];
			fb /= 2;
		} else {
			[b, fb] = [share, value];
			fa /= 2;
		}
	}
	return Math.min(Math.abs(fa), Math.abs(fb)) <= REST_SHARE * span && b - a < 0.5
		? (a + b) / 2
		: null;
}

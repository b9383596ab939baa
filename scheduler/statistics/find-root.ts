/** A root search. The function has different signs at the two ends, or is 0 at one of them. */
export type RootProblem = {
	compute: (x: number) => number;
	low: number;
	high: number;
	/** The bracket at the end is at most this wide, relative to the root (or absolute below 1). */
	tolerance?: number;
};

type Point = { x: number; y: number };

const ROUNDS_MAX = 400;

/**
 * The point at which a continuous function is 0.
 *
 * Shapes: function and two ends in, number out. Units: those of the function's argument.
 * Method: Ridders' rule with bisection where it does not shrink the bracket by half.
 * Source: C. Ridders, IEEE Trans Circuits Syst 26 (1979). simple-statistics' `bisect` is not used:
 * it needs several times as many evaluations.
 * Accuracy: the tolerance, 1e-14 when left out; scheduler/statistics/find-root.test.ts.
 * @throws RangeError when the function has the same sign at both ends, or is not a number
 * @example findRoot({ compute: (x) => x * x - 2, low: 0, high: 2 }) // 1.414213562373095
 */
export function findRoot({ compute, low, high, tolerance = 1e-14 }: RootProblem): number {
	let a: Point = { x: low, y: compute(low) };
	let b: Point = { x: high, y: compute(high) };
	if (a.y === 0) return a.x;
	if (b.y === 0) return b.x;
	if (!(a.y > 0 !== b.y > 0) || Number.isNaN(a.y) || Number.isNaN(b.y))
		throw new RangeError(`no change of sign: ${a.y} at ${low}, ${b.y} at ${high}`);
	for (let round = 0; round < ROUNDS_MAX; round += 1) {
		const width = Math.abs(b.x - a.x);
		const x = (a.x + b.x) / 2;
		if (width <= tolerance * Math.max(1, Math.abs(x)) || x === a.x || x === b.x) return x;
		const middle = { x, y: compute(x) };
		if (middle.y === 0) return middle.x;
		const guess = reachOver(a, middle, b);
		const next = { x: guess, y: compute(guess) };
		if (next.y === 0) return next.x;
		[a, b] = shrink([a, middle, next, b].sort((p, q) => p.x - q.x));
	}
	return (a.x + b.x) / 2;
}

/** Where an exponential times a line through the three points is 0. */
function reachOver(a: Point, middle: Point, b: Point): number {
	const root = Math.sqrt(middle.y * middle.y - a.y * b.y);
	const step = (middle.x - a.x) * (middle.y / root) * (a.y > b.y ? 1 : -1);
	const guess = middle.x + step;
	const [low, high] = a.x < b.x ? [a.x, b.x] : [b.x, a.x];
	return guess > low && guess < high ? guess : middle.x;
}

/** The first two neighbours with different signs. */
function shrink(points: readonly Point[]): [Point, Point] {
	for (let i = 1; i < points.length; i += 1) {
		const [left, right] = [points[i - 1], points[i]];
		if (left && right && left.y > 0 !== right.y > 0) return [left, right];
	}
	throw new RangeError('the function is not a number within the bracket');
}

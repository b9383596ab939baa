import {
	computeSwingWeights,
	placeAt,
	velocityAt,
	type Launch,
	type Place,
	type SwingWeights,
	type TetherSwing
} from './tether-swing.ts';

/** When the ball is nearest to a point, and the squared distance then. */
export interface NearestPass {
	readonly time: number;
	readonly squared: number;
}

/** Weights at even times, made once for a task. */
export interface SwingTable {
	readonly swing: TetherSwing;
	readonly interval: number;
	/** c, s, dc, ds at each time, one after another. */
	readonly weights: Float64Array;
}

/** Intervals of one turn. Two extremes inside one interval would differ by less than 1e-7 of the orbit. */
const INTERVALS_PER_TURN = 128;
const ROUNDS_MAX = 60;
/** Error of a time at which Newton's steps end, s; the distance there is off by its square. */
const TIME_DONE = 1e-13;

export function createSwingTable(swing: TetherSwing): SwingTable {
	const turns = (swing.window * swing.omega0) / (2 * Math.PI);
	const count = Math.max(16, Math.ceil(INTERVALS_PER_TURN * turns));
	const interval = swing.window / count;
	const weights = new Float64Array(4 * (count + 1));
	for (let i = 0; i <= count; i++) {
		const { c, s, dc, ds } = computeSwingWeights(swing, i * interval);
		weights.set([c, s, dc, ds], 4 * i);
	}
	return { swing, interval, weights };
}

/**
 * The pass nearest to a point over the whole window: the global minimum, not the first.
 *
 * Units:   m, s; squared m².
 * Method:  distance and its rate at even times from a table; in every interval where the rate turns from
 *          falling to rising and where, by a bound on the second derivative, the least distance could be
 *          undercut, Newton's steps kept inside the interval; both ends of the window count.
 * Source:  method sheet A1.
 * @param end last time looked at, s
 */
export function findNearestPass(
	{ swing, interval, weights }: SwingTable,
	launch: Launch,
	point: Place,
	end: number = swing.window
): NearestPass {
	const sag = (computeBend(swing, launch, point) * interval ** 2) / 8;
	const x0 = launch.place[0];
	const y0 = launch.place[1];
	const u0 = launch.velocity[0];
	const v0 = launch.velocity[1];
	const count = Math.min(weights.length / 4, Math.floor(end / interval) + 1);
	let bestTime = 0;
	let best = Number.POSITIVE_INFINITY;
	const valleys: Valley[] = [];
	let squaredBefore = 0;
	let rateBefore = 0;
	// Plain numbers only: this runs for every execution that is looked at.
	for (let i = 0; i < count; i++) {
		const c = weights[4 * i] ?? 0;
		const s = weights[4 * i + 1] ?? 0;
		const x = c * x0 + s * u0 - point[0];
		const y = c * y0 + s * v0 - point[1];
		const dc = weights[4 * i + 2] ?? 0;
		const ds = weights[4 * i + 3] ?? 0;
		const squared = x * x + y * y;
		const rate = x * (dc * x0 + ds * u0) + y * (dc * y0 + ds * v0);
		if (squared < best) {
			best = squared;
			bestTime = i * interval;
		}
		if (rateBefore < 0 && rate > 0) {
			const floor = Math.min(squaredBefore, squared) - sag;
			valleys.push({ from: (i - 1) * interval, to: i * interval, floor });
		}
		squaredBefore = squared;
		rateBefore = rate;
	}
	const last = (count - 1) * interval;
	if (last < end) valleys.push({ from: last, to: end, floor: Number.NEGATIVE_INFINITY });
	let nearest: NearestPass = { time: bestTime, squared: best };
	for (const { from, to, floor } of valleys)
		if (floor < nearest.squared)
			nearest = nearer(nearest, descend({ swing, launch, point }, from, to));
	return nearest;
}

interface Valley {
	readonly from: number;
	readonly to: number;
	/** No distance in it is smaller, squared. */
	readonly floor: number;
}

/** First time at which the ball is nearer to a point than a radius; null: never up to the end. */
export function findFirstWithin(
	table: SwingTable,
	launch: Launch,
	point: Place,
	{ radius, end }: { radius: number; end: number }
): number | null {
	const { swing, interval } = table;
	const limit = radius ** 2;
	if (measureAt(swing, launch, point, 0).squared < limit) return 0;
	let [from, time] = [0, 0];
	while (time < end) {
		time = Math.min(time + interval, end);
		const valley = descend({ swing, launch, point }, from, time);
		if (valley.squared < limit) return bisect(from, valley.time);
		from = time;
	}
	return null;

	function bisect(outside: number, inside: number): number {
		let [low, high] = [outside, inside];
		for (let round = 0; round < ROUNDS_MAX; round++) {
			const middle = (low + high) / 2;
			if (measureAt(swing, launch, point, middle).squared < limit) high = middle;
			else low = middle;
		}
		return high;
	}
}

interface Approach {
	readonly squared: number;
	/** Half the rate of the squared distance: (r − point)·ṙ. */
	readonly rate: number;
}

function measureApproach({ place, velocity }: Launch, point: Place, at: SwingWeights): Approach {
	const x = at.c * place[0] + at.s * velocity[0] - point[0];
	const y = at.c * place[1] + at.s * velocity[1] - point[1];
	const vx = at.dc * place[0] + at.ds * velocity[0];
	const vy = at.dc * place[1] + at.ds * velocity[1];
	return { squared: x * x + y * y, rate: x * vx + y * vy };
}

function measureAt(swing: TetherSwing, launch: Launch, point: Place, time: number): NearestPass {
	const { squared } = measureApproach(launch, point, computeSwingWeights(swing, time));
	return { time, squared };
}

function nearer(a: NearestPass, b: NearestPass): NearestPass {
	return b.squared < a.squared ? b : a;
}

/** Largest second derivative of the squared distance, from the energy, which never grows. */
function computeBend({ omega0, gamma }: TetherSwing, launch: Launch, point: Place): number {
	const { place, velocity } = launch;
	const reach = Math.hypot(place[0], place[1], velocity[0] / omega0, velocity[1] / omega0);
	const speed = omega0 * reach;
	const pull = omega0 ** 2 * reach + 2 * gamma * speed;
	return 2 * speed ** 2 + 2 * (reach + Math.hypot(point[0], point[1])) * pull;
}

/** Least distance inside an interval: where the rate is 0, or the nearer end. */
function descend(
	{ swing, launch, point }: { swing: TetherSwing; launch: Launch; point: Place },
	from: number,
	to: number
): NearestPass {
	const rateAt = (t: number) => measureApproach(launch, point, computeSwingWeights(swing, t)).rate;
	const ends = nearer(measureAt(swing, launch, point, from), measureAt(swing, launch, point, to));
	let [low, high] = [from, to];
	if (!(rateAt(low) < 0 && rateAt(high) > 0)) return ends;
	let time = (low + high) / 2;
	for (let round = 0; round < ROUNDS_MAX; round++) {
		const rate = rateAt(time);
		if (rate < 0) low = time;
		else high = time;
		const step = rate / computeRateSlope({ swing, launch, point }, time);
		const newton = time - step;
		const next = newton > low && newton < high ? newton : (low + high) / 2;
		const isDone = Math.abs(next - time) <= TIME_DONE;
		time = next;
		if (isDone) break;
	}
	return nearer(ends, measureAt(swing, launch, point, time));
}

/** ṙ·ṙ + (r − point)·r̈ with r̈ = −ω₀²·r − 2γ·ṙ. */
function computeRateSlope(
	{ swing, launch, point }: { swing: TetherSwing; launch: Launch; point: Place },
	time: number
): number {
	const at = computeSwingWeights(swing, time);
	const [x, y] = placeAt(launch, at);
	const [vx, vy] = velocityAt(launch, at);
	const stiffness = swing.omega0 ** 2;
	const pullX = -stiffness * x - 2 * swing.gamma * vx;
	const pullY = -stiffness * y - 2 * swing.gamma * vy;
	return vx * vx + vy * vy + (x - point[0]) * pullX + (y - point[1]) * pullY;
}

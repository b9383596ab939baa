import { solveLower } from '../linear-algebra/cholesky.ts';
import { dot, entry, norm, scale, type Matrix, type Vector } from '../linear-algebra/vector.ts';
import { drawUniform } from '../random/random-stream.ts';
import { createSeededStream } from '../random/seeded-stream.ts';
import {
	computeChiSquareCdf,
	computeChiSquareQuantile,
	computeChiSquareSurvival
} from '../statistics/chi-square.ts';
import { computeHalton } from '../statistics/halton.ts';
import { computeNormalQuantile } from '../statistics/normal.ts';
import { computeNormalPoints } from '../statistics/r-sequence.ts';

export interface ToleranceRequest {
	trialCount: number;
	variableCount: number;
	/** Share β of the population that the ellipsoid must hold. */
	share: number;
	/** Confidence γ with which it holds that share. */
	confidence: number;
	/** Samples and directions that are averaged over; more is slower and more exact. */
	sampleCount?: number;
	directionCount?: number;
}

const SAMPLES = 1000;
const DIRECTIONS = 128;
/** Most dimensions of Halton points; more are filled from a seeded stream. */
const HALTON_DIMENSIONS = 36;
const SEED = 20240610;
const ROUNDS = 60;

/**
 * c² of the ellipsoid around the sample mean that holds at least a share of a normal population, with
 * confidence.
 *
 * Method:  means and covariance shapes of samples are spread evenly over their distribution (Halton points,
 *          Bartlett decomposition). For each, the room the share needs is solved along fixed directions by
 *          the χ distribution of the radius. The size of the covariance is independent of its shape, so
 *          its χ² distribution is averaged exactly and c² solved for the confidence.
 * Source:  method sheet B2; case ellipsoid-factor-tolerance (Monte Carlo in R, 3 %). Own code: no kept
 *          package has it.
 * Accuracy: 1 % for n > d + 2, 3 % below; tolerance-factor.test.ts (Monte Carlo of 40 000 samples).
 * @throws {RangeError} not more trials than variables, or a share or confidence outside 0 to 1
 */
export function computeToleranceFactor(request: ToleranceRequest): number {
	const { trialCount: n, variableCount: d, share, confidence } = request;
	if (!(n > d)) throw new RangeError('a tolerance ellipsoid requires more trials than variables');
	if (![share, confidence].every((value) => value > 0 && value < 1))
		throw new RangeError('share and confidence must lie in 0 to 1');
	const { sampleCount = SAMPLES, directionCount = DIRECTIONS } = request;
	const directions = listDirections(d, directionCount);
	const radius = createRadiusTable(d);
	const rooms = listPlaces(sampleCount, d + (d * (d + 1)) / 2).map((place) =>
		findRoom(drawSample(place, n, d), directions, share, radius)
	);
	return solveFactor(rooms, { n, d, confidence });
}

/** Points of the unit cube, evenly spread as far as Halton points reach. */
function listPlaces(count: number, dimensions: number): number[][] {
	const even = computeHalton(count, Math.min(dimensions, HALTON_DIMENSIONS));
	const stream = createSeededStream(SEED);
	const draw = () => Math.max(drawUniform(stream), Number.EPSILON);
	return even.map((place) => Array.from({ length: dimensions }, (_, j) => place[j] ?? draw()));
}

/** Unit vectors spread over the sphere, each with its opposite; on the circle exactly even. */
function listDirections(d: number, count: number): number[][] {
	if (d === 1) return [[1], [-1]];
	if (d === 2)
		return Array.from({ length: count }, (_, i) => {
			const angle = (2 * Math.PI * (i + 0.5)) / count;
			return [Math.cos(angle), Math.sin(angle)];
		});
	return computeNormalPoints(Math.ceil(count / 2), d).flatMap((point) => {
		const direction = scale(point, 1 / norm(point));
		return [direction, scale(direction, -1)];
	});
}

interface Sample {
	readonly mean: Vector;
	/** Lower triangular factor of the covariance of trace 1. */
	readonly lower: Matrix;
}

/** The sample mean and the shape of the covariance that belong to a place of the unit cube. */
function drawSample(place: Vector, n: number, d: number): Sample {
	const mean = place.slice(0, d).map((p) => computeNormalQuantile(p) / Math.sqrt(n));
	let next = d;
	const lower = Array.from({ length: d }, (_row, i) =>
		Array.from({ length: d }, (_column, j) => {
			if (j > i) return 0;
			const p = entry(place, next++);
			return j === i ? Math.sqrt(computeChiSquareQuantile(p, n - 1 - i)) : computeNormalQuantile(p);
		})
	);
	const size = norm(lower.flat());
	return { mean, lower: lower.map((values) => scale(values, 1 / size)) };
}

/** Room q with which {z: (z − mean)ᵀ·shape⁻¹·(z − mean) <= q} holds the share of the population. */
function findRoom(
	{ mean, lower }: Sample,
	directions: Matrix,
	share: number,
	radius: (r: number) => number
): number {
	const center = solveLower(lower, mean);
	const offset = dot(center, center);
	// Along r·u the distance is a·r² − 2·b·r + offset.
	const lines = directions.map((direction) => {
		const whitened = solveLower(lower, direction);
		return [dot(whitened, whitened), dot(whitened, center)] as const;
	});
	const held = (room: number) => {
		let sum = 0;
		for (const [a, b] of lines) {
			const inner = b * b - a * (offset - room);
			if (inner <= 0) continue;
			const root = Math.sqrt(inner);
			sum += radius((b + root) / a) - (b > root ? radius((b - root) / a) : 0);
		}
		return sum / lines.length;
	};
	return bisect((room) => held(room) >= share, Math.max(offset, 1));
}

/** Distribution of the distance of a standard normal point from the origin, from a table. */
function createRadiusTable(d: number): (r: number) => number {
	const [nodes, reach] = [4000, Math.sqrt(d) + 9];
	const table = Float64Array.from({ length: nodes + 2 }, (_, i) =>
		computeChiSquareCdf(((i * reach) / nodes) ** 2, d)
	);
	return (r) => {
		if (r <= 0) return 0;
		if (r >= reach) return 1;
		const place = (r / reach) * nodes;
		const below = Math.floor(place);
		const low = table[below] ?? 0;
		return low + (place - below) * ((table[below + 1] ?? 1) - low);
	};
}

/** c² at which the mean chance that the covariance is large enough for its room is the confidence. */
function solveFactor(
	rooms: readonly number[],
	{ n, d, confidence }: { n: number; d: number; confidence: number }
): number {
	const confidenceAt = (factor: number) =>
		rooms.reduce(
			(sum, room) => sum + computeChiSquareSurvival((room * (n - 1)) / factor, d * (n - 1)),
			0
		) / rooms.length;
	return bisect((factor) => confidenceAt(factor) >= confidence, d);
}

/** Smallest positive number that is enough, for something that stays enough above it. */
function bisect(isEnough: (value: number) => boolean, start: number): number {
	let high = start;
	while (!isEnough(high) && high < Number.MAX_VALUE / 4) high *= 2;
	let low = 0;
	for (let round = 0; round < ROUNDS && high - low > 1e-9 * high; round++) {
		const middle = (low + high) / 2;
		if (isEnough(middle)) high = middle;
		else low = middle;
	}
	return high;
}

import { computeChiSquareCdf } from '../statistics/chi-square.ts';

/** scale·y², y normal with this mean and SD 1. */
export interface WeightedSquare {
	readonly scale: number;
	readonly mean: number;
}

/** Nodes and weights of the Gauss-Legendre rule of order 8 on −1 … 1; each node stands for ±. */
export const GAUSS_8: readonly (readonly [number, number])[] = [
	[0.1834346424956498, 0.362683783378362],
	[0.525532409916329, 0.3137066458778873],
	[0.7966664774136267, 0.2223810344533745],
	[0.9602898564975363, 0.1012285362903763]
];
/** Phase that one panel may span, rad. */
const PANEL_PHASE = 1.5;
/** Part of the distance to the nearest singularity of the integrand that one panel may span. */
const PANEL_REACH = 0.6;
/** Natural logarithm of the part of the integral that may be left out. */
const LOG_TAIL_MAX = Math.log(1e-13);
/** Half waves of the tail that are summed, and how far out they start. */
const TAIL_WAVES = 40;
const TAIL_FROM_WAVES = 40;
/** Part of the phase that may still bend where the tail starts. */
const BEND_MAX = 0.02;

/**
 * Probability that a weighted sum of squared normal values is at or below x.
 *
 * Shapes:  squares: any number of terms, each with a positive scale; x in their unit.
 * Method:  equal scales without shift: chi-square. Else Imhof's inversion of the characteristic function
 *          by Gauss-Legendre panels as narrow as the phase needs; where the phase runs straight, half
 *          waves are summed with repeated averages (Euler).
 * Source:  Imhof 1961, Biometrika 48:419; method sheet B7. Own code: no kept package has it.
 * Accuracy: absolute 1e-9; quadratic-form.test.ts against quadrature, chi-square and case mass-3d.
 * @throws {RangeError} no term, or a scale that is not positive
 * @example computeQuadraticCdf([{ scale: 1, mean: 0 }, { scale: 1, mean: 0 }], 5.991464547108) // 0.95
 */
export function computeQuadraticCdf(squares: readonly WeightedSquare[], x: number): number {
	const [first] = squares;
	if (!first || squares.some(({ scale, mean }) => !(scale > 0) || !Number.isFinite(mean)))
		throw new RangeError('computeQuadraticCdf requires terms with positive scales');
	if (!(x > 0)) return 0;
	const isChiSquare = squares.every(({ scale, mean }) => mean === 0 && scale === first.scale);
	if (isChiSquare) return computeChiSquareCdf(x / first.scale, squares.length);
	const terms = squares.map(({ scale, mean }) => ({ weight: scale / x, shift: mean * mean }));
	return Math.min(1, Math.max(0, 0.5 - integrate(terms) / Math.PI));
}

interface Term {
	/** Scale in units of x. */
	readonly weight: number;
	/** Noncentrality. */
	readonly shift: number;
}

/** ∫ sin θ(u) / (u·ρ(u)) du from 0 on. */
function integrate(terms: readonly Term[]): number {
	const steepest = Math.max(...terms.map(({ weight }) => weight));
	let u = 0;
	let sum = 0;
	for (;;) {
		const bend = bendAt(terms, u);
		if (logTail(terms, u) < LOG_TAIL_MAX) return sum;
		if (u > TAIL_FROM_WAVES * 2 * Math.PI && bend < BEND_MAX) return sum + sumTail(terms, u);
		const next =
			u + Math.min(PANEL_PHASE / (0.5 + bend), PANEL_REACH * Math.hypot(u, 1 / steepest));
		sum += integratePanel(terms, u, next);
		u = next;
	}
}

/** Half waves of length 2π, their partial sums averaged again and again. */
function sumTail(terms: readonly Term[], from: number): number {
	let partial = 0;
	let sums = Array.from({ length: TAIL_WAVES }, (_, i) => {
		const middle = from + (2 * i + 1) * Math.PI;
		partial +=
			integratePanel(terms, middle - Math.PI, middle - Math.PI / 2) +
			integratePanel(terms, middle - Math.PI / 2, middle) +
			integratePanel(terms, middle, middle + Math.PI / 2) +
			integratePanel(terms, middle + Math.PI / 2, middle + Math.PI);
		return partial;
	});
	while (sums.length > 1) sums = sums.slice(1).map((value, i) => (value + (sums[i] ?? value)) / 2);
	return sums[0] ?? 0;
}

function integratePanel(terms: readonly Term[], from: number, to: number): number {
	const [middle, half] = [(from + to) / 2, (to - from) / 2];
	let sum = 0;
	for (const [node, weight] of GAUSS_8)
		sum +=
			weight *
			(integrandAt(terms, middle - node * half) + integrandAt(terms, middle + node * half));
	return sum * half;
}

function integrandAt(terms: readonly Term[], u: number): number {
	let phase = -u / 2;
	let logRho = 0;
	for (const { weight, shift } of terms) {
		const turn = weight * u;
		const square = turn * turn;
		phase += (Math.atan(turn) + (shift * turn) / (1 + square)) / 2;
		logRho += Math.log1p(square) / 4 + (shift * square) / (1 + square) / 2;
	}
	return Math.sin(phase) / (u * Math.exp(logRho));
}

/** Bound of the speed of the phase beyond that of −u/2. */
function bendAt(terms: readonly Term[], u: number): number {
	return terms.reduce(
		(sum, { weight, shift }) => sum + (weight * (1 + shift)) / (1 + (weight * u) ** 2) / 2,
		0
	);
}

/** Logarithm of a bound of what the integral adds beyond u. */
function logTail(terms: readonly Term[], u: number): number {
	if (u === 0) return Infinity;
	const logRho = terms.reduce((sum, { weight, shift }) => {
		const square = (weight * u) ** 2;
		return sum + Math.log(weight * u) / 2 + (shift * square) / (1 + square) / 2;
	}, 0);
	return -logRho - Math.log(terms.length / 2);
}

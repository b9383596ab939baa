import type { Theta } from './criterion.ts';
import type { Evaluated } from './gradient.ts';

export type Descended = { at: Evaluated; evaluations: number; isSettled: boolean };

type Triple = [number, number, number];
type Hessian = [Triple, Triple, Triple];

const ROUNDS_MAX = 200;
/** The fall a step may still promise at the end. */
const FALL_MIN = 1e-12;

/**
 * Descends a criterion of three parameters with its exact gradient.
 *
 * Method:  BFGS on the inverse Hessian with backtracking; ends when the fall that the step promises
 *          is below 1e-12 (a gradient alone is too strict where the criterion's own rounding is
 *          larger), then Newton steps with a Hessian by differences of the gradient.
 * Source:  J. Nocedal and S. Wright, Numerical Optimization, chapter 6; power sheet, section 5.
 */
export function descend(evaluate: (theta: Theta) => Evaluated, start: Theta): Descended {
	let at = evaluate(start);
	let inverse = scaledIdentity(at);
	let evaluations = 1;
	let isSettled = false;
	let isFresh = true;
	for (let round = 0; round < ROUNDS_MAX && !isSettled; round += 1) {
		const step = multiply(inverse, at.gradient).map((value) => -value) as Triple;
		const slope = dot(step, at.gradient);
		if (!(slope < 0) || -slope < FALL_MIN) {
			if (isFresh) isSettled = true;
			inverse = scaledIdentity(at);
			// Promises of a stale matrix are tried once more with a fresh one.
			isFresh = true;
			if (-slope < FALL_MIN && dot(at.gradient, at.gradient) < 1e-8) isSettled = true;
			continue;
		}
		const moved = backtrack(evaluate, at, step, slope);
		evaluations += moved.evaluations;
		if (!moved.next) {
			if (isFresh) isSettled = -slope < 1e-7;
			if (isFresh) break;
			inverse = scaledIdentity(at);
			isFresh = true;
			continue;
		}
		inverse = update(inverse, at, moved.next);
		at = moved.next;
		isFresh = false;
	}
	const polished = polish(evaluate, at);
	return {
		at: polished.at,
		evaluations: evaluations + polished.evaluations,
		isSettled: isSettled || polished.isSettled
	};
}

function backtrack(
	evaluate: (theta: Theta) => Evaluated,
	at: Evaluated,
	step: Triple,
	slope: number
): { next: Evaluated | null; evaluations: number } {
	for (let k = 0, size = 1; k < 40; k += 1, size *= k < 4 ? 0.5 : 0.2) {
		const next = evaluate(shift(at.theta, step, size));
		const fall = at.profile.criterion - next.profile.criterion;
		if (fall >= -1e-4 * size * slope && fall > 0) return { next, evaluations: k + 1 };
	}
	return { next: null, evaluations: 40 };
}

/** Up to four Newton steps, each kept only if the gradient shrinks and the criterion does not rise. */
function polish(
	evaluate: (theta: Theta) => Evaluated,
	start: Evaluated
): { at: Evaluated; evaluations: number; isSettled: boolean } {
	let at = start;
	let evaluations = 0;
	for (let round = 0; round < 4; round += 1) {
		const step = solveNewton(computeHessian(evaluate, at), at.gradient);
		evaluations += 6;
		if (!step) return { at, evaluations, isSettled: false };
		const next = evaluate(shift(at.theta, step, -1));
		evaluations += 1;
		const isBetter =
			dot(next.gradient, next.gradient) < dot(at.gradient, at.gradient) &&
			next.profile.criterion <= at.profile.criterion + 1e-10;
		const promise = 0.5 * Math.abs(dot(step, at.gradient));
		if (isBetter) at = next;
		if (promise < 1e-13) return { at, evaluations, isSettled: true };
		if (!isBetter) return { at, evaluations, isSettled: promise < 1e-9 };
	}
	return { at, evaluations, isSettled: false };
}

/** By central differences of the exact gradient. */
export function computeHessian(
	evaluate: (theta: Theta) => Evaluated,
	{ theta }: Evaluated
): Hessian {
	const columns = [0, 1, 2].map((k) => {
		const width = 1e-5 * Math.max(0.1, Math.abs(theta[k] ?? 0));
		const unit = [0, 1, 2].map((i) => (i === k ? 1 : 0)) as Triple;
		const up = evaluate(shift(theta, unit, width)).gradient;
		const down = evaluate(shift(theta, unit, -width)).gradient;
		return up.map((value, i) => (value - (down[i] ?? 0)) / (2 * width));
	});
	const at = (i: number, j: number) => ((columns[i]?.[j] ?? 0) + (columns[j]?.[i] ?? 0)) / 2;
	const row = (i: number): Triple => [at(i, 0), at(i, 1), at(i, 2)];
	return [row(0), row(1), row(2)];
}

/** H⁻¹ g; null when H is not positive. A direction without any curvature or slope stays put. */
function solveNewton(H: Hessian, g: Triple): Triple | null {
	const lower: Hessian = [
		[0, 0, 0],
		[0, 0, 0],
		[0, 0, 0]
	];
	const size = Math.max(H[0][0], H[1][1], H[2][2]);
	for (let i = 0; i < 3; i += 1)
		for (let j = 0; j <= i; j += 1) {
			let sum = read(H, i, j);
			for (let k = 0; k < j; k += 1) sum -= read(lower, i, k) * read(lower, j, k);
			if (i !== j) write(lower, i, j, sum / read(lower, j, j));
			else if (sum > 1e-10 * size) write(lower, i, i, Math.sqrt(sum));
			else if (Math.abs(g[i] ?? 0) < 1e-9 && sum > -1e-6 * size) write(lower, i, i, 1e150);
			else return null;
		}
	const x: Triple = [...g];
	for (let i = 0; i < 3; i += 1) {
		for (let k = 0; k < i; k += 1) x[i] = (x[i] ?? 0) - read(lower, i, k) * (x[k] ?? 0);
		x[i] = (x[i] ?? 0) / read(lower, i, i);
	}
	for (let i = 2; i >= 0; i -= 1) {
		for (let k = i + 1; k < 3; k += 1) x[i] = (x[i] ?? 0) - read(lower, k, i) * (x[k] ?? 0);
		x[i] = (x[i] ?? 0) / read(lower, i, i);
	}
	return x;
}

function update(inverse: Hessian, from: Evaluated, to: Evaluated): Hessian {
	const s = from.theta.map((value, i) => (to.theta[i] ?? 0) - value) as Triple;
	const y = from.gradient.map((value, i) => (to.gradient[i] ?? 0) - value) as Triple;
	const sy = dot(s, y);
	if (!(sy > 1e-14 * Math.sqrt(dot(s, s) * dot(y, y)))) return inverse;
	const hy = multiply(inverse, y);
	const factor = (1 + dot(y, hy) / sy) / sy;
	const at = (i: number, j: number) =>
		read(inverse, i, j) +
		factor * (s[i] ?? 0) * (s[j] ?? 0) -
		((hy[i] ?? 0) * (s[j] ?? 0) + (s[i] ?? 0) * (hy[j] ?? 0)) / sy;
	const row = (i: number): Triple => [at(i, 0), at(i, 1), at(i, 2)];
	return [row(0), row(1), row(2)];
}

/** A first step of a tenth of theta. */
function scaledIdentity({ theta, gradient }: Evaluated): Hessian {
	const length = Math.sqrt(dot(gradient, gradient));
	const size = Math.max(
		0.05,
		0.1 * Math.sqrt(theta.reduce((sum, value) => sum + value * value, 0))
	);
	const scale = length > 0 ? Math.min(1, size / length) : 1;
	return [
		[scale, 0, 0],
		[0, scale, 0],
		[0, 0, scale]
	];
}

function shift(theta: Theta, step: Triple, size: number): Theta {
	return [theta[0] + size * step[0], theta[1] + size * step[1], theta[2] + size * step[2]];
}

function multiply(H: Hessian, v: Triple): Triple {
	return [dot(H[0], v), dot(H[1], v), dot(H[2], v)];
}

function dot(a: Triple, b: Triple): number {
	return a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
}

function read(H: Hessian, i: number, j: number): number {
	return H[i]?.[j] ?? 0;
}

function write(H: Hessian, i: number, j: number, value: number): void {
	const row = H[i];
	if (row) row[j] = value;
}

import { findRoot } from '../../statistics/find-root.ts';
import { evaluateCriterion, type Evaluated } from './gradient.ts';
import type { Method, Theta } from './criterion.ts';
import type { ModelSums } from './model-sums.ts';
import { descend } from './descend.ts';

export type Minimum =
	{ ok: true; best: Evaluated; evaluations: number } | { ok: false; reason: 'not-converged' };

/**
 * The theta at which the criterion is least.
 *
 * Shapes:  sums in, theta and its profile out, in the coordinates of the sums.
 * Method:  a random intercept: the criterion on a grid of theta, then the root of its derivative
 *          around the best point. Two random effects: quasi-Newton descent with the exact gradient
 *          from the moment estimate and from further starts, Newton steps at the end; at a singular
 *          end the derivative by D says whether leaving it would help.
 * Source:  power sheet, section 5; method sheet E.
 * Accuracy: criterion at most 1e-8 above lme4's; tests/reference/mixed-model.test.ts.
 */
export function minimiseCriterion(sums: ModelSums, method: Method): Minimum {
	return sums.q === 1 ? searchLine(sums, method) : searchPlane(sums, method);
}

/** Relative deviations of the random intercept, from none to a million times the residual's. */
const GRID = [0, ...Array.from({ length: 29 }, (_, i) => 10 ** (-3 + 9 * (i / 28)))];

function searchLine(sums: ModelSums, method: Method): Minimum {
	const at = (a: number) => evaluateCriterion(sums, [a, 0, 0], method);
	const grid = GRID.map(at);
	const lowest = grid.reduce(
		(best, _, i) => (criterionAt(grid, i) < criterionAt(grid, best) ? i : best),
		0
	);
	const [low, high] = [GRID[Math.max(0, lowest - 1)] ?? 0, GRID[lowest + 1]];
	if (high === undefined) return { ok: false, reason: 'not-converged' };
	const slopeAt = (a: number) => at(a).slope[0];
	const best = grid[lowest];
	// The slope by the variance itself does not vanish at 0, where that by theta does.
	if (slopeAt(low) < 0 && slopeAt(high) > 0) {
		const root = findRoot({ compute: slopeAt, low, high, tolerance: 1e-13 });
		return { ok: true, best: at(root), evaluations: GRID.length + 30 };
	}
	return best
		? { ok: true, best, evaluations: GRID.length }
		: { ok: false, reason: 'not-converged' };
}

function criterionAt(grid: readonly Evaluated[], i: number): number {
	return grid[i]?.profile.criterion ?? Infinity;
}

/** Further starts: theta is relative to the residual, its columns to the spread of Z. */
const STARTS: readonly Theta[] = [
	[1, 0, 1],
	[0.3, 0, 0.1],
	[3, 0, 3],
	[0.1, 0, 1]
];

function searchPlane(sums: ModelSums, method: Method): Minimum {
	const evaluate = (theta: Theta) => evaluateCriterion(sums, theta, method);
	let evaluations = 0;
	let best: Evaluated | undefined;
	for (const start of [estimateStart(sums), ...STARTS]) {
		const end = descend(evaluate, start);
		evaluations += end.evaluations;
		if (!best || end.at.profile.criterion < best.profile.criterion) best = end.at;
		if (end.isSettled && !findWayOut(best)) return { ok: true, best, evaluations };
		const way = findWayOut(best);
		if (!way) continue;
		const again = descend(evaluate, way);
		evaluations += again.evaluations;
		if (again.at.profile.criterion < best.profile.criterion) best = again.at;
		if (again.isSettled && !findWayOut(best)) return { ok: true, best, evaluations };
	}
	return { ok: false, reason: 'not-converged' };
}

/**
 * At a singular theta the gradient vanishes by itself in the direction v without variance. If the
 * derivative by D falls there (vᵀSv < 0) the point is a saddle: a theta beyond it. Null otherwise.
 */
function findWayOut({ theta, slope }: Evaluated): Theta | null {
	const [a, b, d] = theta;
	const size = a * a + b * b + d * d;
	if (Math.abs(a * d) > 1e-7 * size && size > 0) return null;
	const [v1, v2] = size === 0 ? pickFalling(slope) : crossDirection(theta);
	const fall = slope[0] * v1 * v1 + 2 * slope[1] * v1 * v2 + slope[2] * v2 * v2;
	if (fall > -1e-7 * (Math.abs(slope[0]) + Math.abs(slope[2]) + 1e-12)) return null;
	return toFactor(a * a + 0.01 * v1 * v1, a * b + 0.01 * v1 * v2, b * b + d * d + 0.01 * v2 * v2);
}

function pickFalling([s11, , s22]: readonly [number, number, number]): [number, number] {
	return s11 < s22 ? [1, 0] : [0, 1];
}

/** The unit direction in which L·Lᵀ has the least variance. */
function crossDirection([a, b, d]: Theta): [number, number] {
	const [d11, d12, d22] = [a * a, a * b, b * b + d * d];
	const angle = 0.5 * Math.atan2(2 * d12, d11 - d22);
	return [-Math.sin(angle), Math.cos(angle)];
}

/** Lower Cholesky factor of a 2 × 2 matrix, with 0 for what is not positive. */
function toFactor(d11: number, d12: number, d22: number): Theta {
	if (!(d11 > 0)) return [0, 0, Math.sqrt(Math.max(0, d22))];
	const a = Math.sqrt(d11);
	const b = d12 / a;
	return [a, b, Math.sqrt(Math.max(0, d22 - b * b))];
}

/**
 * Moment estimate: the spread of the groups' own least-squares lines less what the residual adds.
 * Groups whose line cannot be told are left out.
 */
function estimateStart(sums: ModelSums): Theta {
	const lines: [number, number][] = [];
	const noise: [number, number, number] = [0, 0, 0];
	let explained = 0;
	let used = 0;
	for (const { g, zy } of sums.groups) {
		const det = g[0] * g[2] - g[1] * g[1];
		if (!(det > 1e-8 * g[0] * g[2])) continue;
		const [i11, i12, i22] = [g[2] / det, -g[1] / det, g[0] / det];
		const line: [number, number] = [i11 * zy[0] + i12 * zy[1], i12 * zy[0] + i22 * zy[1]];
		lines.push(line);
		noise[0] += i11;
		noise[1] += i12;
		noise[2] += i22;
		explained += line[0] * zy[0] + line[1] * zy[1];
		used += 1;
	}
	const dfLeft = sums.rowCount - sums.p - 2 * used;
	if (used < 3 || dfLeft < 1) return [1, 0, 1];
	const residual = Math.max(1e-12 * sums.yy, (sums.yy - explained) / dfLeft);
	const moment = (i: 0 | 1, j: 0 | 1, k: 0 | 1 | 2) =>
		lines.reduce((sum, line) => sum + line[i] * line[j], 0) / used / residual - noise[k] / used;
	const [d11, d12, d22] = [moment(0, 0, 0), moment(0, 1, 1), moment(1, 1, 2)];
	const [v11, v22] = [Math.max(d11, 0.02), Math.max(d22, 0.02)];
	const limit = 0.95 * Math.sqrt(v11 * v22);
	return toFactor(v11, Math.max(-limit, Math.min(limit, d12)), v22);
}

import {
	computeCholesky,
	determinantFromCholesky,
	solveWithCholesky
} from '../linear-algebra/cholesky.ts';
import { combineMatrices, crossProduct, scaleMatrix, transpose } from '../linear-algebra/matrix.ts';
import { column, dot, row, subtract, type Matrix } from '../linear-algebra/vector.ts';
import { computeFSurvival } from '../statistics/f-distribution.ts';
import { centerExecutions, computeCovariance, computeMeanVector } from './moments.ts';
import { removeTrend } from './serial-dependence.ts';

export type StationarityTest =
	| { ok: true; statistic: number; F: number; df1: number; df2: number; probability: number }
	| { ok: false; reason: 'singular-covariance' };

/**
 * Hotelling T² of the first half of the trials against the second: has the mean moved?
 *
 * Shapes:  executions (trials × d), in order; trials > d + 3.
 * Method:  pooled covariance; the effective count under lag-1 correlation takes the place of n.
 * Source:  method sheet D4 (DRIFT); case policy-gates (p_halves).
 */
export function testHalves(executions: Matrix, lagOne: number): StationarityTest {
	const n = executions.length;
	const d = row(executions, 0).length;
	const half = Math.floor(n / 2);
	const [first, second] = [executions.slice(0, half), executions.slice(half)];
	const pooled = scaleMatrix(
		combineMatrices(
			[computeCovariance(first), computeCovariance(second)],
			[first.length - 1, second.length - 1]
		),
		1 / (n - 2)
	);
	const factor = computeCholesky(pooled);
	if (!factor.ok) return { ok: false, reason: 'singular-covariance' };
	const delta = subtract(computeMeanVector(first), computeMeanVector(second));
	const weight = (first.length * second.length) / n;
	const effective = countEffective(n, d, lagOne);
	const statistic = (weight * dot(delta, solveWithCholesky(factor.lower, delta)) * effective) / n;
	const df2 = effective - d - 1;
	const F = (df2 / ((effective - 2) * d)) * statistic;
	return { ok: true, statistic, F, df1: d, df2, probability: computeFSurvival(F, d, df2) };
}

/**
 * Wilks' Λ of a straight-line trend of the executions over the trials: do they wander off?
 *
 * Shapes:  executions (trials × d), in order; trials > d + 1.
 * Method:  Λ = |E| / |T|; exact F for one regressor, with the effective count of trials.
 * Source:  case drift-mlm-wilks (R anova.mlm, test = Wilks).
 */
export function testTrend(executions: Matrix, lagOne: number): StationarityTest {
	const n = executions.length;
	const d = row(executions, 0).length;
	const rest = transpose(transpose(executions).map(removeTrend));
	const within = computeCholesky(crossProduct(rest));
	const total = computeCholesky(crossProduct(centerExecutions(executions)));
	if (!within.ok || !total.ok) return { ok: false, reason: 'singular-covariance' };
	const wilks = determinantFromCholesky(within.lower) / determinantFromCholesky(total.lower);
	const df2 = countEffective(n, d, lagOne) - 1 - d;
	const F = (((1 - wilks) / wilks) * df2) / d;
	const probability = computeFSurvival(Math.max(F, 0), d, df2);
	return { ok: true, statistic: wilks, F, df1: d, df2, probability };
}

/** Independent trials that tell as much as n correlated ones; at least d + 4 (method sheet B1, D4). */
function countEffective(n: number, d: number, lagOne: number): number {
	return lagOne > 0 ? Math.max(d + 4, (n * (1 - lagOne)) / (1 + lagOne)) : n;
}

/** Slope of each variable per trial. */
export function computeTrendSlopes(executions: Matrix): number[] {
	const time = executions.map((_, i) => i - (executions.length - 1) / 2);
	const centered = centerExecutions(executions);
	return row(executions, 0).map((_, axis) => dot(time, column(centered, axis)) / dot(time, time));
}

/** Executions less each variable's straight-line trend and mean. */
export function detrendExecutions(executions: Matrix): number[][] {
	return transpose(transpose(executions).map(removeTrend));
}

import { multiplyMatrices, transpose } from '../linear-algebra/matrix.ts';
import { splitRowSpace } from '../linear-algebra/row-space.ts';
import { computeSymmetricEigen } from '../linear-algebra/symmetric-eigen.ts';
import { computeTrace } from '../linear-algebra/symmetric-function.ts';
import {
	dot,
	quadraticForm,
	subtract,
	type Matrix,
	type Vector
} from '../linear-algebra/vector.ts';

export interface GoalSensitivity {
	/** J·Σ·Jᵀ: spread of the results. */
	readonly goalCovariance: readonly (readonly number[])[];
	/** Root of its trace: SD of the result when there is one. */
	readonly goalSd: number;
	/** How strongly the task passes on deviations, largest first. */
	readonly singularValues: readonly number[];
	/** SD of the executions across the solutions and in all. */
	readonly acrossSd: number;
	readonly totalSd: number;
	/** acrossSd / totalSd: 0 all spread lies along the solutions, 1 all across. */
	readonly alignmentFactor: number;
}

export type GoalSensitivityResult =
	({ ok: true } & GoalSensitivity) | { ok: false; reason: 'rank-deficient-jacobian' | 'no-spread' };

/**
 * How a cloud of executions becomes spread of the result: passive sensitivity times alignment times body
 * spread, exactly so for one result.
 *
 * Shapes:  covariance (d × d), Jacobian J (r × d).
 * Units:   results in result units; SDs of executions in (scaled) units of the variables.
 * Method:  goal covariance J·Σ·Jᵀ; singular values of J; spread in the rows of J against all spread.
 * Source:  Cusumano & Cesari 2006, Biol Cybern 94:367; method sheet B10; case gem-sensitivity.
 * Accuracy: relative 1e-10 for a Jacobian of condition below 1e4.
 */
export function computeGoalSensitivity(covariance: Matrix, J: Matrix): GoalSensitivityResult {
	const { basis } = splitRowSpace(J);
	if (basis.length < J.length) return { ok: false, reason: 'rank-deficient-jacobian' };
	const goalCovariance = multiplyMatrices(multiplyMatrices(J, covariance), transpose(J));
	const gains = computeSymmetricEigen(multiplyMatrices(J, transpose(J))).values;
	const across = basis.reduce((sum, direction) => sum + quadraticForm(covariance, direction), 0);
	const total = computeTrace(covariance);
	if (!(total > 0)) return { ok: false, reason: 'no-spread' };
	return {
		ok: true,
		goalCovariance,
		goalSd: Math.sqrt(Math.max(0, computeTrace(goalCovariance))),
		singularValues: gains.map((gain) => Math.sqrt(Math.max(0, gain))).reverse(),
		acrossSd: Math.sqrt(Math.max(0, across)),
		totalSd: Math.sqrt(total),
		alignmentFactor: Math.sqrt(Math.max(0, across) / total)
	};
}

export interface GoalSeries {
	/** Deviations along the solutions: one list a free direction. */
	readonly along: readonly (readonly number[])[];
	/** Deviations across them: one list a result. */
	readonly across: readonly (readonly number[])[];
}

/**
 * Deviations of each trial from a point of the solutions, along and across them.
 *
 * Shapes:  executions (trials × d), origin (d), Jacobian J (r × d) there; lists of length trials.
 * Method:  products with an orthonormal basis of the null space and of the rows of J. With one result the
 *          sign across is that of J; signs along are free.
 * Source:  Cusumano & Cesari 2006; method sheet B10 (δ_T, δ_P); goal-sensitivity.test.ts.
 */
export function splitGoalSeries(executions: Matrix, origin: Vector, J: Matrix): GoalSeries {
	const { basis, complement } = splitRowSpace(J);
	const rests = executions.map((execution) => subtract(execution, origin));
	const project = (direction: Vector) => rests.map((rest) => dot(rest, direction));
	return { along: complement.map(project), across: basis.map(project) };
}

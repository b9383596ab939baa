import { removeDirections, splitRowSpace } from '../linear-algebra/row-space.ts';
import { dot, row, type Matrix } from '../linear-algebra/vector.ts';
import { centerExecutions } from './moments.ts';

export interface ManifoldVariance {
	/** Variance per degree of freedom along the solutions, across them, and of all. */
	readonly along: number;
	readonly across: number;
	readonly total: number;
	readonly ratio: number;
	/** ln(along / across): 0 without structure; this is the value to test. */
	readonly logRatio: number;
	/** (along − across) / total, from −d/r to d/(d − r). */
	readonly index: number;
	/** The index on an unbounded scale: half the log ratio plus ½·ln((d − r)/r). */
	readonly indexZ: number;
}

export type ManifoldVarianceResult =
	| ({ ok: true } & ManifoldVariance)
	| { ok: false; reason: 'rank-deficient-jacobian' | 'no-spread-along' | 'no-spread-across' };

/** Part of all variance that is rounding, not spread. */
const ROUNDING_SHARE = 1e-28;

/**
 * Variance that leaves the result alone against variance that changes it.
 *
 * Shapes:  executions (trials × d), trials >= 2; Jacobian J (r × d) at their mean, r < d.
 * Units:   along, across, total in squared units of the variables: give scaled coordinates when units
 *          differ. Ratio and index have none but depend on the scaling all the same.
 * Method:  deviations split into the rows of J and the rest; divisor (n − 1) times the directions.
 * Source:  Scholz & Schöner 1999, Exp Brain Res 126:289; method sheet B9; cases ucm-two-finger,
 *          ucm-arm-1d. Accuracy: relative 1e-10.
 * @throws {RangeError} not more variables than results, or fewer than two trials
 */
export function computeManifoldVariance(executions: Matrix, J: Matrix): ManifoldVarianceResult {
	const d = row(executions, 0).length;
	const r = J.length;
	if (!(r < d && r > 0) || row(J, 0).length !== d)
		throw new RangeError('computeManifoldVariance requires fewer results than variables');
	if (executions.length < 2)
		throw new RangeError('computeManifoldVariance requires at least two trials');
	const { basis } = splitRowSpace(J);
	if (basis.length < r) return { ok: false, reason: 'rank-deficient-jacobian' };
	let [alongSum, acrossSum] = [0, 0];
	for (const deviation of centerExecutions(executions)) {
		const rest = removeDirections(deviation, basis);
		alongSum += dot(rest, rest);
		acrossSum += basis.reduce((sum, direction) => sum + dot(deviation, direction) ** 2, 0);
	}
	const least = ROUNDING_SHARE * (alongSum + acrossSum);
	if (!(alongSum > least)) return { ok: false, reason: 'no-spread-along' };
	if (!(acrossSum > least)) return { ok: false, reason: 'no-spread-across' };
	return { ok: true, ...combine(alongSum, acrossSum, { n: executions.length, d, r }) };
}

function combine(
	alongSum: number,
	acrossSum: number,
	{ n, d, r }: { n: number; d: number; r: number }
): ManifoldVariance {
	const along = alongSum / ((n - 1) * (d - r));
	const across = acrossSum / ((n - 1) * r);
	const total = (alongSum + acrossSum) / ((n - 1) * d);
	const logRatio = Math.log(along) - Math.log(across);
	return {
		...{ along, across, total, ratio: along / across, logRatio },
		index: (along - across) / total,
		indexZ: logRatio / 2 + Math.log((d - r) / r) / 2
	};
}

import { computeSingularValues } from '../linear-algebra/singular-values.ts';
import type { Vector } from '../linear-algebra/vector.ts';
import type { ScaledTask } from './scaled-task.ts';

/** Least ratio of the singular values of the Jacobian at which a manifold has a clear direction. */
export const SINGULAR_RATIO_MIN = 1e-3;

/** How well the results determine the directions of the manifold at one place. */
export interface Conditioning {
	/** Of the Jacobian by scaled variables, largest first. */
	readonly singularValues: readonly number[];
	readonly rank: number;
	/** Count of free directions there: d − rank. */
	readonly freeCount: number;
	/** The manifold changes its dimension here or nearby: policies refuse to go on. */
	readonly isSingular: boolean;
}

/**
 * Singular values of the Jacobian at one execution.
 *
 * Units:   scaled.
 * Method:  a singular value below 1e-12 of the largest counts as 0; singular below 1e-3.
 * Source:  method sheet A6. Null where the Jacobian has no finite value.
 */
export function computeConditioning(
	task: Pick<ScaledTask, 'jacobian' | 'variableCount'>,
	z: Vector
): Conditioning | null {
	const jacobian = task.jacobian(z);
	if (!jacobian.every((row) => row.every(Number.isFinite))) return null;
	const singularValues = computeSingularValues(jacobian);
	const [largest = 0] = singularValues;
	const rank = singularValues.filter((value) => value > 1e-12 * largest).length;
	const least = singularValues.at(-1) ?? 0;
	return {
		...{ singularValues, rank, freeCount: task.variableCount - rank },
		isSingular: !(least > SINGULAR_RATIO_MIN * largest)
	};
}

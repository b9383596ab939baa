import { z } from 'zod';
import { checkSmoothness } from '../../tasks/check-smoothness.ts';
import { computeConditioning } from '../../tasks/conditioning.ts';
import { createTask } from '../../tasks/create-task.ts';
import { computeFreeDirections } from '../../tasks/free-directions.ts';
import { createScaledTask } from '../../tasks/scaled-task.ts';
import type { TrialsInput } from '../trial-inputs.ts';

const numbers = z.array(z.number());
const rows = z.array(numbers);

export const jacobianSchema = z.strictObject({
	unit: z.string(),
	trials: z.array(
		z.strictObject({
			/** null: the task has no result there. */
			results: numbers.nullable(),
			/** Results by variables, in their units; null: no slope. */
			jacobian: rows.nullable(),
			/** By variables in baseline SD. */
			scaledJacobian: rows.nullable(),
			singularValues: numbers.nullable(),
			rank: z.int().nullable(),
			freeCount: z.int().nullable(),
			isSingular: z.boolean(),
			/** Directions in which no result changes, scaled; null: none that is clear. */
			freeDirections: rows.nullable(),
			/** false: a kink or a jump; null: it cannot be told. */
			isSmooth: z.boolean().nullable(),
			invalid: z.string().nullable()
		})
	)
});

/** Results, their slopes and the directions in which none changes, at each trial. */
export function describeJacobians({ task: record, trials }: TrialsInput) {
	const task = createTask(record);
	const scaled = createScaledTask(task);
	return {
		unit: task.resultUnit,
		trials: trials.map((x) => {
			const z = scaled.toScaled(x);
			const conditioning = computeConditioning(scaled, z);
			return {
				results: finiteOrNull(task.results(x)),
				jacobian: finiteRowsOrNull(task.jacobian(x)),
				scaledJacobian: finiteRowsOrNull(scaled.jacobian(z)),
				singularValues: conditioning?.singularValues ?? null,
				rank: conditioning?.rank ?? null,
				freeCount: conditioning?.freeCount ?? null,
				isSingular: conditioning?.isSingular ?? true,
				freeDirections: computeFreeDirections(scaled, z),
				isSmooth: checkSmoothness(task, x),
				invalid: task.findInvalid(x)
			};
		})
	};
}

function finiteOrNull(values: number[]): number[] | null {
	return values.every(Number.isFinite) ? values : null;
}

function finiteRowsOrNull(matrix: number[][]): number[][] | null {
	return matrix.every((values) => values.every(Number.isFinite)) ? matrix : null;
}

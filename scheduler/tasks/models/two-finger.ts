import { z } from 'zod';
import { createSingleResult, type ResultModel } from '../result-model.ts';
import { entry } from '../../linear-algebra/vector.ts';
import { resultUnit, tolerance, variable, variableSchema } from '../task-variable.ts';

/** Two fingers press together: forces F₁ and F₂; result F₁ + F₂ − target. */
export const twoFingerRecordSchema = z.strictObject({
	type: z.literal('two-finger'),
	target: z.number().positive().default(10).describe('sum of the two forces that is asked for, N'),
	tolerance: tolerance.default(1),
	resultUnit: resultUnit.default('N'),
	variables: z
		.array(variableSchema)
		.length(2)
		.prefault(() => [
			variable('F1_N', 'N', [0, 20], [5, 0.5]),
			variable('F2_N', 'N', [0, 20], [5, 0.5])
		])
});

export type TwoFingerRecord = z.output<typeof twoFingerRecordSchema>;

/** Source: method sheet A5. The manifold is the line F₂ = target − F₁, tangent (1, −1)/√2. */
export function createTwoFinger({ target }: TwoFingerRecord): ResultModel {
	return createSingleResult({
		evaluate: (x) => entry(x, 0) + entry(x, 1) - target,
		gradient: () => [1, 1]
	});
}

import { z } from 'zod';
import {
	gravity,
	positive,
	resultUnit,
	tolerance,
	variable,
	variableSchema
} from '../task-variable.ts';

/** Sliding puck pushed with constant force F over a way s; result F·s/(μ·m·g) − D. */
export const puckPushRecordSchema = z.strictObject({
	type: z.literal('puck-push'),
	mu: positive.default(0.2).describe('friction coefficient μ, a ratio'),
	m: positive.default(0.5).describe('mass of the puck, kg'),
	g: gravity,
	D: positive.default(1.2).describe('distance of the target from where the push begins, m'),
	tolerance: tolerance.default(0.1),
	resultUnit: resultUnit.default('m'),
	variables: z
		.array(variableSchema)
		.length(2)
		.prefault(() => [
			variable('force_N', 'N', [1, 15], [5, 0.4]),
			variable('way_m', 'm', [0.05, 0.6], [0.24, 0.02])
		])
});

/** Sliding puck on a surface that the person chooses: release speed v and friction μ. */
export const puckFrictionRecordSchema = z.strictObject({
	type: z.literal('puck-friction'),
	x0: z.number().default(0).describe('release position, m'),
	g: gravity,
	D: z.number().default(2).describe('distance of the target, m'),
	tolerance: tolerance.default(0.1),
	resultUnit: resultUnit.default('m'),
	variables: z
		.array(variableSchema)
		.length(2)
		.prefault(() => [
			variable('v_m_s', 'm/s', [0.5, 4], [2.8, 0.1]),
			variable('mu', '', [0.05, 0.4], [0.2, 0.01])
		])
});

export type PuckPushRecord = z.output<typeof puckPushRecordSchema>;
export type PuckFrictionRecord = z.output<typeof puckFrictionRecordSchema>;

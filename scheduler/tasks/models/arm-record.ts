import { z } from 'zod';
import { positive, resultUnit, tolerance, variable, variableSchema } from '../task-variable.ts';

const arm = {
	lengths: z
		.array(positive)
		.length(3)
		.default([0.31, 0.27, 0.17])
		.describe('lengths of upper arm, forearm and hand, m'),
	tolerance: tolerance.default(0.02),
	resultUnit: resultUnit.default('m'),
	variables: z
		.array(variableSchema)
		.length(3)
		.prefault(() => [
			variable('shoulder_deg', 'deg', [-60, 150], [45, 3]),
			variable('elbow_deg', 'deg', [0, 150], [60, 3]),
			variable('wrist_deg', 'deg', [-70, 80], [20, 3])
		])
};

/** Three joints in the plane, each angle from the link before it; results: where the fingertip misses. */
export const armEndpointRecordSchema = z.strictObject({
	type: z.literal('arm-endpoint'),
	target: z
		.tuple([z.number(), z.number()])
		.default([0.05, 0.55])
		.describe('place of the target from the shoulder, m'),
	...arm
});

/** The same arm where only the place along x counts. */
export const armXRecordSchema = z.strictObject({
	type: z.literal('arm-x'),
	targetX: z.number().default(0.05).describe('x of the target from the shoulder, m'),
	...arm
});

export type ArmEndpointRecord = z.output<typeof armEndpointRecordSchema>;
export type ArmXRecord = z.output<typeof armXRecordSchema>;

import { z } from 'zod';
import {
	gravity,
	positive,
	resultUnit,
	tolerance,
	variable,
	variableSchema
} from '../task-variable.ts';

/**
 * One bounce of a ball on a paddle: speed of the ball before it (down is negative), speed of the paddle,
 * and, with a third variable, height of the meeting; result = height of the next apex − target.
 */
export const paddleBounceRecordSchema = z
	.strictObject({
		type: z.literal('paddle-bounce'),
		restitution: z
			.number()
			.gt(0)
			.lt(1)
			.default(0.6)
			.describe('share ε of the closing speed that the bounce gives back'),
		targetHeight: z.number().default(0.6).describe('height of the apex that is asked for, m'),
		impactHeight: z
			.number()
			.default(0)
			.describe('height at which ball and paddle meet when it is no variable, m'),
		g: gravity,
		tolerance: tolerance.default(0.05),
		resultUnit: resultUnit.default('m'),
		variables: z
			.array(variableSchema)
			.min(2)
			.max(3)
			.prefault(() => [
				variable('ball_speed_m_s', 'm/s', [-5, -1], [-3.43, 0.15]),
				variable('paddle_speed_m_s', 'm/s', [0, 3], [0.86, 0.1])
			])
	})
	.refine(
		({ targetHeight, impactHeight, variables }) =>
			variables.length > 2 || targetHeight > impactHeight,
		{ error: 'targetHeight must lie above impactHeight', path: ['targetHeight'] }
	);

export type PaddleBounceRecord = z.output<typeof paddleBounceRecordSchema>;

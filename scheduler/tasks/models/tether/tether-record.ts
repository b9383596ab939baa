import { z } from 'zod';
import { positive, resultUnit, tolerance, variable, variableSchema } from '../../task-variable.ts';

const place = z.tuple([z.number(), z.number()]);

/**
 * A ball on two crossed springs, swung past a post: arm angle (counter-clockwise from the x axis) and
 * speed along the arm's circle at release; result = signed distance at which the ball passes the target.
 */
export const tetheredBallRecordSchema = z
	.strictObject({
		type: z.literal('tethered-ball'),
		k: positive.default(1.2).describe('stiffness of each spring, N/m'),
		m: positive.default(0.12).describe('mass of the ball, kg'),
		relaxationTime: positive
			.nullable()
			.default(18)
			.describe('time in which the swing falls to 1/e, s; null: it does not'),
		arm: positive.default(0.38).describe('length of the arm that throws, m'),
		pivot: place
			.default([0, -1.45])
			.describe('where the arm turns, from the center of the post, m'),
		target: place.default([0.3, 1.1]).describe('from the center of the post, m'),
		postRadius: z.number().nonnegative().default(0.22).describe('radius of the post, m'),
		ballRadius: z.number().nonnegative().default(0).describe('radius of the ball, m'),
		postHit: z
			.enum(['penalty', 'truncate'])
			.default('penalty')
			.describe('a ball that meets the post counts as the penalty, or by its way up to there'),
		postPenalty: positive.default(0.5).describe('size of the result of a ball on the post, m'),
		window: positive
			.nullable()
			.default(null)
			.describe('time from release that is looked at, s; null: one turn without damping'),
		tolerance: tolerance.default(0.05),
		resultUnit: resultUnit.default('m'),
		variables: z
			.array(variableSchema)
			.length(2)
			.prefault(() => [
				variable('alpha_deg', 'deg', [-180, 180], [110, 6]),
				variable('v_m_s', 'm/s', [-7, 7], [2.5, 0.25])
			])
	})
	.refine(
		({ k, m, relaxationTime }) => relaxationTime === null || k / m > 1 / relaxationTime ** 2,
		{
			error: 'so strongly damped a ball does not swing',
			path: ['relaxationTime']
		}
	)
	.refine((record) => record.postHit === 'truncate' || record.postPenalty > record.tolerance, {
		error: 'postPenalty must be larger than the tolerance: a ball on the post is a miss',
		path: ['postPenalty']
	});

export type TetheredBallRecord = z.output<typeof tetheredBallRecordSchema>;

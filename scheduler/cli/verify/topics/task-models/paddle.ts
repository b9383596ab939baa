import { z } from 'zod';
import { createPaddleBounce } from '../../../../tasks/models/paddle-bounce.ts';
import { paddleBounceRecordSchema } from '../../../../tasks/models/paddle-record.ts';
import {
	computeBounceStability,
	computeStableAccelerations,
	computeSteadyBounce
} from '../../../../tasks/models/paddle-stability.ts';
import { answerEach } from '../../each-of.ts';
import { firstOf, forInputs, listSchema, repeat } from '../../topic.ts';

const g = z.number().positive().default(9.81);

/** Cases of the bounced ball; they write the restitution as alpha. */
export const PADDLE_TOPIC = firstOf(
	forInputs(z.strictObject({ alpha: listSchema, g }), ({ alpha, g }) =>
		answerEach({ alpha }, (one) => {
			const { stable, fastest } = computeStableAccelerations({ restitution: one.alpha, g });
			return {
				...{ lower: stable[0], upper: stable[1] },
				...{ fastest_ring_lower: fastest[0], fastest_ring_upper: fastest[1] }
			};
		})
	),
	forInputs(
		z.strictObject({
			...{ alpha: listSchema, acc: listSchema, g },
			...{ apex: z.number().optional(), x_impact: z.number().default(0) }
		}),
		({ alpha, acc, g, apex, x_impact }) => {
			const count = Math.max(alpha.length, acc.length);
			const restitutions = repeat(alpha, count);
			const rows = repeat(acc, count).map((acceleration, i) =>
				describeStability(restitutions[i] ?? Number.NaN, acceleration, g)
			);
			return { rows, ...rows[0], ...describeSteady({ alpha, g, apex, x_impact }) };
		}
	),
	forInputs(
		z.strictObject({ alpha: listSchema, g, apex: z.number(), x_impact: z.number().default(0) }),
		describeSteady
	),
	forInputs(
		z.strictObject({
			...{ alpha: z.number(), g, v_minus: listSchema, v_paddle: listSchema },
			...{ x_impact: listSchema.default([0]), h_target: z.number().default(0) }
		}),
		({ alpha, g, v_minus, v_paddle, x_impact, h_target }) => {
			const record = paddleBounceRecordSchema.parse({
				...{ type: 'paddle-bounce', restitution: alpha, g, targetHeight: h_target },
				variables: ['ball', 'paddle', 'height'].map((name) => ({
					...{ name, unit: '', min: -100, max: 100, origin: 0, scale: 1 }
				}))
			});
			const model = createPaddleBounce(record);
			return answerEach({ v_minus, v_paddle, x_impact }, (one) => {
				const x = [one.v_minus, one.v_paddle, one.x_impact];
				const signed = model.evaluate(x);
				const v_plus = (1 + alpha) * one.v_paddle - alpha * one.v_minus;
				return { v_plus, apex: signed + h_target, signed, jacobian: model.gradient(x) };
			});
		}
	)
);

function describeStability(alpha: number, acc: number, g: number) {
	const stability = computeBounceStability({ restitution: alpha, g }, acc);
	return {
		...{ alpha, acc, trace: stability.trace, det: stability.determinant },
		...{ spectral_radius: stability.spectralRadius, complex: stability.isComplex },
		...{ stable: stability.isStable, eig_re: stability.real, eig_im: stability.imaginary }
	};
}

function describeSteady(inputs: {
	alpha: readonly number[];
	g: number;
	apex?: number | undefined;
	x_impact: number;
}) {
	const { alpha, g, apex, x_impact } = inputs;
	if (apex === undefined) return {};
	return answerEach({ alpha }, (one) => {
		const steady = computeSteadyBounce(
			{ restitution: one.alpha, g },
			{ apex, impactHeight: x_impact }
		);
		if (!steady.ok) return { v_minus: null, v_plus: null, v_paddle: null, period: null };
		const { ballSpeed, paddleSpeed, period } = steady;
		return { v_minus: ballSpeed, v_plus: -ballSpeed, v_paddle: paddleSpeed, period };
	});
}

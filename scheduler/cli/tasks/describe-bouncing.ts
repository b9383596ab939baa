import { z } from 'zod';
import {
	computeBounceStability,
	computeStableAccelerations,
	computeSteadyBounce
} from '../../tasks/models/paddle-stability.ts';

const pair = z.array(z.number()).length(2);

export const bouncingInputSchema = z.strictObject({
	restitution: z.number().gt(0).lt(1).default(0.6).describe('share of the closing speed kept'),
	g: z.number().positive().default(9.81).describe('gravity, m/s²'),
	apex: z.number().default(0.6).describe('height of every apex, m'),
	impactHeight: z.number().default(0).describe('height at which ball and paddle meet, m'),
	accelerations: z
		.array(z.number())
		.max(1000)
		.default([])
		.describe('of the paddle where it meets the ball, m/s²; down is negative')
});

export const bouncingSchema = z.strictObject({
	steady: z.union([
		z.strictObject({
			ok: z.literal(true),
			ballSpeed: z.number().describe('before each bounce, m/s; down is negative'),
			paddleSpeed: z.number(),
			period: z.number().describe('s')
		}),
		z.strictObject({ ok: z.literal(false), reason: z.literal('apex-below-paddle') })
	]),
	/** Accelerations between which errors die out, and between which they do so fastest. */
	stable: pair,
	fastest: pair,
	accelerations: z.array(
		z.strictObject({
			...{ acceleration: z.number(), trace: z.number(), determinant: z.number() },
			...{ real: pair, imaginary: pair, spectralRadius: z.number() },
			...{ isComplex: z.boolean(), isStable: z.boolean() }
		})
	)
});

/** Steady bouncing to one apex, and what becomes of small errors. */
export function describeBouncing(input: z.output<typeof bouncingInputSchema>) {
	const { accelerations, apex, impactHeight, ...bouncing } = input;
	return {
		steady: computeSteadyBounce(bouncing, { apex, impactHeight }),
		...computeStableAccelerations(bouncing),
		accelerations: accelerations.map((acceleration) => ({
			...{ acceleration, ...computeBounceStability(bouncing, acceleration) }
		}))
	};
}

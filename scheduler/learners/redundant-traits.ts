import { z } from 'zod';

const share = z.number().min(0).max(1);
const positive = z.number().positive();

const forgettingSchema = z.discriminatedUnion('kind', [
	z.strictObject({ kind: z.literal('exponential'), timeConstantHours: positive, floor: share }),
	z.strictObject({ kind: z.literal('power'), timeScaleHours: positive, exponent: positive })
]);

/** How errors are taken back, in the space of the results. */
const adaptationSchema = z.discriminatedUnion('kind', [
	z.strictObject({
		kind: z.literal('single-rate'),
		retention: z.number().gt(0).max(1),
		rate: z.number().min(0).lt(1),
		forgetting: forgettingSchema.prefault({
			...{ kind: 'exponential', timeConstantHours: 120, floor: 0.2 }
		})
	}),
	z.strictObject({
		kind: z.literal('two-rate'),
		fastRetention: z.number().gt(0).max(1).default(0.59),
		fastRate: z.number().min(0).lt(1).default(0.21),
		slowRetention: z.number().gt(0).max(1).default(0.992),
		slowRate: z.number().min(0).lt(1).default(0.02),
		fastForgetting: forgettingSchema.prefault({
			...{ kind: 'exponential', timeConstantHours: 0.5, floor: 0 }
		}),
		slowForgetting: forgettingSchema.prefault({
			...{ kind: 'exponential', timeConstantHours: 120, floor: 0.2 }
		})
	})
]);

/**
 * What stays the same of a model learner with more ways than results. Spreads are scaled; along: in the
 * directions that change no result, across: in the others.
 */
export const redundantTraitsSchema = z.strictObject({
	/** Motor noise of a practised person. The learner does not know it. */
	motorAlong: positive,
	motorAcross: positive,
	/** Noise at the very first trial as a multiple of the practised one, and the trials after which 63 % of
	 * the way is done. */
	noviceFactor: z.number().min(1).default(1),
	learningTrials: positive.default(80),
	/** SD of tried ways as a share of the motor noise. The learner knows what it tried. */
	exploration: z.number().min(0).max(3).default(0.3),
	/** Whether it goes on trying after a success. */
	explore: z.enum(['always', 'after-failure']).default('after-failure'),
	/** keep: what was tried with success is kept; gradient: the better than usual, the more of it. */
	rewardRule: z.enum(['keep', 'gradient']).default('keep'),
	/** Part of the exploration that is kept, or the step along the gradient. */
	rewardRate: z.number().min(0).max(1).default(0.5),
	/** Rate of the running mean of success (gradient). */
	usualRate: share.default(0.1),
	adaptation: adaptationSchema.prefault({ kind: 'single-rate', retention: 1, rate: 0.11 })
});

export type RedundantTraits = z.output<typeof redundantTraitsSchema>;
export type RedundantTraitsInput = z.input<typeof redundantTraitsSchema>;
export type Adaptation = RedundantTraits['adaptation'];

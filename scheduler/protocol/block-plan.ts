import { z } from 'zod';
import { FEEDBACKS } from '../policies/obligation-settings.ts';

/** What a planned block is for; adaptive time is filled by the arm's rule. */
export const BLOCK_PURPOSES = [
	'baseline',
	'practice',
	'region',
	'shift',
	'probe',
	'clamp',
	'washout',
	'rest',
	'retention',
	'transfer',
	'adaptive'
] as const;
export type BlockPurpose = (typeof BLOCK_PURPOSES)[number];

/**
 * A penalized region at one place for everybody: an ellipse along the execution variables' axes.
 *
 * Shapes: one value for each execution variable, in the task's order. Units: those of the variables.
 */
export const fixedRegionSchema = z.object({
	center: z.array(z.number()).min(1).max(12),
	halfWidth: z.array(z.number().positive()).min(1).max(12)
});

/**
 * A target moved by the same distance for everybody, in the unit of the result: in even steps from the
 * first to the last trial, or at once where both are equal.
 */
export const fixedShiftSchema = z.object({ from: z.number(), to: z.number() });

/** One block of a visit. Settings that are left out are those of a plain block. */
export const blockPlanSchema = z.object({
	number: z.number().int().min(1),
	purpose: z.enum(BLOCK_PURPOSES),
	/** All trials, warm-up included; 0 in a rest. */
	trials: z.number().int().min(0).max(5000),
	/** Length of a rest; other blocks last as long as their trials. */
	restMinutes: z.number().min(0.5).max(240).optional(),
	/** The first trials of the block, which are run but not analysed. */
	warmUpTrials: z.number().int().min(0).max(500).optional(),
	restBetweenTrialsSeconds: z.number().min(0).max(600).optional(),
	/** Rest between this block and the next of the visit. */
	restAfterMinutes: z.number().min(0).max(240).optional(),
	/** Version of the text that is read to the person; see the protocol's instructions. */
	instruction: z.string().max(40).optional(),
	feedback: z.enum(FEEDBACKS).optional(),
	/** Transfer: where the other target lies beside the usual one, in the unit of the result. */
	targetOffset: z.number().optional(),
	region: fixedRegionSchema.optional(),
	shift: fixedShiftSchema.optional()
});

export type BlockPlan = z.infer<typeof blockPlanSchema>;
export type FixedRegion = z.infer<typeof fixedRegionSchema>;
export type FixedShift = z.infer<typeof fixedShiftSchema>;

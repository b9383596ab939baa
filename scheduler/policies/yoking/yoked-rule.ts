import { z } from 'zod';
import { blockParametersSchema, EXECUTED_KINDS } from '../policy-memory.ts';

const count = z.number().int().nonnegative();
const hours = z.number();

export const ORPHAN_RULES = ['keep-last-level', 're-pair', 'plain-practice'] as const;
export const LATE_RULES = ['wait', 'keep-last-level', 'plain-practice'] as const;

/** What a protocol declares about a yoked arm. */
export const yokingSettingsSchema = z.strictObject({
	/** Hours by which a partner's chain is planned behind the master's. */
	leadHours: z.number().nonnegative().default(20),
	/** When the master withdraws. */
	orphan: z.enum(ORPHAN_RULES).default('plain-practice'),
	/** When the master's block is not scored yet. */
	late: z.enum(LATE_RULES).default('wait')
});

/** A block that the master has run or is about to run. */
const masterBlockSchema = z.strictObject({
	/** When its data were in and scored, hours on the study's clock; null: not yet. */
	scoredAtHours: hours.nullable(),
	kind: z.enum(EXECUTED_KINDS),
	/** With `levels`, the time course of a shift, trial by trial. */
	parameters: blockParametersSchema.prefault({})
});

/** Everything the next block of a yoked partner depends on; hours on one clock for the whole study. */
export const yokedRuleSchema = z.strictObject({
	kind: z.literal('yoked'),
	settings: yokingSettingsSchema.prefault({}),
	/** Number of this block in the chain, 0 for the first. */
	block: count,
	nowHours: hours,
	/** End of the partner's block before, and the longest gap that may follow it. */
	previousEndHours: hours,
	gapMaxHours: z.number().nonnegative(),
	master: z.strictObject({
		code: z.string().min(1),
		withdrawn: z.boolean().default(false),
		blocks: z.array(masterBlockSchema)
	}),
	/** Finished masters without a partner of their own, with their distance to this partner. */
	pool: z
		.array(
			z.strictObject({
				code: z.string().min(1),
				distance: z.number().nonnegative(),
				blocks: z.array(masterBlockSchema)
			})
		)
		.default([])
});

export type YokingSettings = z.output<typeof yokingSettingsSchema>;
export type YokedRule = z.output<typeof yokedRuleSchema>;
export type MasterBlock = z.output<typeof masterBlockSchema>;

import { z } from 'zod';
import { regionSchema } from '../perturbations/region-settings.ts';
import { shiftRuleSchema } from '../perturbations/shift-rule.ts';
import { EXECUTED_KINDS, policyMemorySchema } from './policy-memory.ts';

const count = z.number().int().nonnegative();
const rating = z.number().min(0).max(10);

/** The block that was really run since the last decision. */
export const lastBlockSchema = z.strictObject({
	kind: z.enum(EXECUTED_KINDS),
	/** Executions in task units, in the order they were made; complete rows only. */
	trials: z.array(z.array(z.number()).min(1)).default([]),
	/** Shift blocks: target less result for each trial, in the unit of the result. */
	errors: z.array(z.number()).default([]),
	/** Shift blocks: whether each trial hit its shifted target; null: judged by the tolerance. */
	hits: z.array(z.boolean()).nullable().default(null),
	/** Shift blocks: levels that the rig used, to be compared with the replay; null: not returned. */
	levels: z.array(z.number()).nullable().default(null),
	/** Trials left in the day after this block; null: unknown. */
	leftToday: count.nullable().default(null),
	/** What the rig was given, when it differs from the last plan. */
	region: regionSchema.nullable().default(null),
	rule: shiftRuleSchema.nullable().default(null)
});

/** Everything about one person that the choice of the next block may depend on. */
export const policyStateSchema = z.strictObject({
	day: count,
	/** 0 for the first block of the day. */
	blockInDay: count,
	/** Null: not limited. */
	blocksLeftToday: count.nullable().default(null),
	trialsToday: count.default(0),
	trialsLeftToday: count.nullable().default(null),
	/** Hours since the last block of an earlier day; null inside a day. */
	gapHours: z.number().nonnegative().nullable().default(null),
	readiness: z
		.strictObject({
			pain: rating.default(0),
			fatigue: rating.default(0),
			stop: z.boolean().default(false),
			/** The operator calls the running perturbation too much: it ends, recovery follows. */
			burden: z.boolean().optional()
		})
		.prefault({}),
	/** A person has looked at what was held and lets it go on. */
	release: z.boolean().default(false),
	/** Null: no block since the last decision. */
	last: lastBlockSchema.nullable().default(null),
	memory: policyMemorySchema.prefault({})
});

export type LastBlock = z.output<typeof lastBlockSchema>;
export type PolicyState = z.output<typeof policyStateSchema>;
export type PolicyStateInput = z.input<typeof policyStateSchema>;

import { z } from 'zod';
import { FEEDBACKS } from '../policies/obligation-settings.ts';
import { yokingSettingsSchema } from '../policies/yoking/yoked-rule.ts';
import { BLOCK_PURPOSES } from '../protocol/block-plan.ts';
import { DAY_MEANINGS, MISSED_DAY_RULES, RELAXABLE_RULES } from '../protocol/booking-rules.ts';
import { ARM_RULES } from '../protocol/protocol-content.ts';

/**
 * A protocol as far as it is written: the shape of its content, in which any number may still be missing.
 * A draft and a frozen version both read as a design; what is not asked about here is kept as it is.
 */

const number = z.number().nullable().default(null);
const text = z.string().default('');

const blockSchema = z.looseObject({
	purpose: z.enum(BLOCK_PURPOSES),
	trials: number,
	restMinutes: number,
	warmUpTrials: number,
	restBetweenTrialsSeconds: number,
	restAfterMinutes: number,
	instruction: text,
	feedback: z.enum(FEEDBACKS).nullable().default(null),
	targetOffset: number,
	region: z.looseObject({}).nullable().default(null),
	shift: z.looseObject({ from: number, to: number }).nullable().default(null)
});

const gapSchema = z.looseObject({
	minHours: number,
	targetHours: number,
	maxHours: number,
	nightsBetween: number
});

const visitSchema = z.looseObject({
	label: text,
	kind: z.enum(['baseline', 'practice', 'retention']),
	minutes: number,
	setupMinutes: number,
	cleanupMinutes: number,
	gapBefore: gapSchema.nullable().default(null),
	blocks: z.array(blockSchema).default([]),
	armBlocks: z.record(z.string(), z.array(blockSchema)).default({})
});

const armSchema = z.looseObject({
	key: z.string(),
	name: text,
	rule: z.enum(ARM_RULES),
	master: z.string().nullable().default(null)
});

const bookingSchema = z.looseObject({
	earliestMinute: number,
	latestMinute: number,
	sameTimeToleranceMinutes: number,
	weekdays: z.array(z.number()).default([]),
	pauses: z.looseObject({ count: number, minHours: number, maxHours: number }).prefault({}),
	dayMeaning: z.enum(DAY_MEANINGS).default('elapsed-hours')
});

export const designSchema = z.looseObject({
	task: z.unknown().optional(),
	arms: z.array(armSchema).default([]),
	visits: z.array(visitSchema).default([]),
	booking: bookingSchema.prefault({}),
	policy: z.record(z.string(), z.unknown()).default({}),
	limits: z.looseObject({ minutesPerVisit: number, trialsPerVisit: number }).prefault({}),
	comparison: z.looseObject({ peoplePerArm: number }).nullable().default(null),
	trialSeconds: number,
	yoking: yokingSettingsSchema.partial().nullable().default(null).catch(null),
	missedDay: z
		.looseObject({ rule: z.enum(MISSED_DAY_RULES), withinHours: number, mostMissed: number })
		.nullable()
		.default(null),
	relaxation: z.array(z.looseObject({ rule: z.enum(RELAXABLE_RULES), by: number })).default([])
});

export type Design = z.output<typeof designSchema>;
export type DesignVisit = z.output<typeof visitSchema>;
export type DesignBlock = z.output<typeof blockSchema>;
export type DesignArm = z.output<typeof armSchema>;
export type DesignGap = z.output<typeof gapSchema>;

/** A block of which only kind and length are said. */
export function plainDesignBlock(purpose: DesignBlock['purpose'], trials: number): DesignBlock {
	return blockSchema.parse({ purpose, trials });
}

/** A visit's name on screen; its place while it has none. */
export function nameVisit({ label }: { label: string }, index: number): string {
	return label.trim() || `Visit ${index + 1}`;
}

import { z } from 'zod';
import { redundantTraitsSchema } from '../learners/redundant-traits.ts';
import { policySettingsSchema } from '../policies/policy-settings.ts';
import { taskRecordSchema } from '../tasks/task-record.ts';

/** People of one kind in a simulated study. */
const groupSchema = z.strictObject({
	name: z.string().min(1),
	count: z.number().int().min(1).max(1000).default(10),
	traits: redundantTraitsSchema,
	/** Where they start, scaled: the solution nearest to it; each person's own place varies by placeSd. */
	place: z.array(z.number()).optional(),
	placeSd: z.number().min(0).default(0)
});

/** A study to be simulated with the policy that would run it. */
export const studySettingsSchema = z.strictObject({
	task: taskRecordSchema,
	protocol: policySettingsSchema.prefault({}),
	days: z.number().int().min(1).max(60).default(6),
	blocksPerDay: z.number().int().min(1).max(40).default(4),
	/** Hours between the end of one day and the start of the next. */
	gapHours: z.number().positive().default(23),
	groups: z.array(groupSchema).min(1).max(40),
	seed: z.number().int().default(1)
});

export type StudySettings = z.output<typeof studySettingsSchema>;
export type StudySettingsInput = z.input<typeof studySettingsSchema>;
export type SimulatedGroup = z.output<typeof groupSchema>;

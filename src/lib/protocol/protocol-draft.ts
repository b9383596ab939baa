import { z } from 'zod';
import {
	analysisDraftSchema,
	armDraftSchema,
	bookingDraftSchema,
	draftNumber,
	draftText,
	instructionDraftSchema,
	limitsDraftSchema,
	missedDayDraftSchema,
	relaxationDraftSchema,
	visitDraftSchema,
	yokingDraftSchema
} from './draft-parts';
import { taskDraftSchema } from '../tasks/task-draft';
import { emptyAnalysis, usualYoking } from './empty-parts';
import { upgradeTask } from './upgrade-task';

/**
 * A version that is still being written: the shape of the protocol's forms. A number that is not
 * typed yet is null, texts may be empty; nothing is refused before freezing but what cannot be kept.
 */

const number = draftNumber;
const text = draftText;

export const protocolDraftSchema = z.object({
	format: z.literal(1),
	/** A draft of the older form, with a puck or a formula, opens as one of any model. */
	task: z.preprocess(upgradeTask, taskDraftSchema),
	arms: z.array(armDraftSchema).min(1).max(6, 'A study has at most 6 arms'),
	visits: z.array(visitDraftSchema).max(40, 'A protocol has at most 40 visits'),
	booking: bookingDraftSchema,
	aims: z.object({
		region: z.object({ isOn: z.boolean(), share: number, escapes: number }),
		shift: z.object({ isOn: z.boolean(), share: number, goal: number })
	}),
	settle: z.object({ minBlocks: number, maxBlocks: number }),
	/** Settings of the policy without a field here, as they came from an earlier version. */
	otherPolicy: z.record(z.string(), z.unknown()),
	guardRails: z.object({ automaticCoverMax: number, automaticReachSdMax: number }),
	readyLeadHours: number,
	invitationDelayHours: number,
	earliestStartHours: z.object({ min: number, max: number }),
	comparison: z.object({
		outcome: text(200),
		armA: text(31),
		armB: text(31),
		effectD: number,
		effectSource: text(500),
		alpha: number,
		sides: z.union([z.literal(1), z.literal(2)]),
		peoplePerArm: number,
		peopleLostShare: number,
		peopleLostSource: text(500),
		effectLostShare: number,
		effectLostSource: text(500),
		enteredBy: z.record(z.string(), z.string().max(200))
	}),
	limits: limitsDraftSchema,
	consentTextVersion: text(40),
	variants: z.array(z.string()),
	/** Seconds of one trial with everything that belongs to it. */
	trialSeconds: number.default(null),
	yoking: yokingDraftSchema.default({ ...usualYoking }),
	/** Null: nothing is declared. */
	missedDay: missedDayDraftSchema.nullable().default(null),
	relaxation: z.array(relaxationDraftSchema).max(12, 'At most 12 steps').default([]),
	instructions: z.array(instructionDraftSchema).max(40, 'At most 40 texts').default([]),
	analysis: analysisDraftSchema.default(emptyAnalysis()),
	/** Why a finding of the checker stays as it is, by the finding's key. */
	justifications: z.record(z.string(), text(1000)).default({})
});

export type ProtocolDraft = z.infer<typeof protocolDraftSchema>;

/** The assumptions of the comparison whose source and author the power page names. */
export const assumptionFields = [
	'effectD',
	'peopleLostShare',
	'effectLostShare',
	'alpha',
	'peoplePerArm'
] as const;
export type AssumptionField = (typeof assumptionFields)[number];

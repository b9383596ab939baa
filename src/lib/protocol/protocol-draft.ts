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
import { emptyAnalysis, usualYoking } from './empty-parts';

/**
 * A version that is still being written: the shape of the protocol's forms. A number that is not
 * typed yet is null, texts may be empty; nothing is refused before freezing but what cannot be kept.
 */

const number = draftNumber;
const text = draftText;

const variableDraftSchema = z.object({
	name: text(64),
	unit: text(32),
	min: number,
	max: number,
	origin: number,
	scale: number,
	resolution: number
});

/** Both kinds of task are kept, so that choosing the other loses nothing. */
const taskDraftSchema = z.object({
	type: z.enum(['puck', 'formula']),
	puck: z.object({
		mu: number,
		g: number,
		D: number,
		tolerance: number,
		variables: z.array(variableDraftSchema).length(2)
	}),
	formula: z.object({
		formula: text(1000),
		resultUnit: text(32),
		tolerance: number,
		variables: z.array(variableDraftSchema).max(12, 'A formula has at most 12 variables')
	})
});

export const protocolDraftSchema = z.object({
	format: z.literal(1),
	task: taskDraftSchema,
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
export type TaskDraft = ProtocolDraft['task'];
export type VariableDraft = TaskDraft['formula']['variables'][number];

/** The assumptions of the comparison whose source and author the power page names. */
export const assumptionFields = [
	'effectD',
	'peopleLostShare',
	'effectLostShare',
	'alpha',
	'peoplePerArm'
] as const;
export type AssumptionField = (typeof assumptionFields)[number];

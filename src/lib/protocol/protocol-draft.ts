import { z } from 'zod';

/**
 * A version that is still being written: the shape of the protocol's forms. A number that is not
 * typed yet is null, texts may be empty; nothing is refused before freezing but what cannot be kept.
 */

const number = z.number().nullable();
const text = (max: number) => z.string().max(max, `Longer than ${max} characters`);

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

const gapDraftSchema = z.object({
	minHours: number,
	targetHours: number,
	maxHours: number,
	nightsBetween: number
});

const visitDraftSchema = z.object({
	label: text(40),
	kind: z.enum(['baseline', 'practice', 'retention']),
	minutes: number,
	setupMinutes: number,
	cleanupMinutes: number,
	/** Not used for the first visit; kept in case it moves down. */
	gapBefore: gapDraftSchema,
	blocks: z
		.array(z.object({ purpose: z.enum(['baseline', 'adaptive', 'retention']), trials: number }))
		.max(40, 'A visit has at most 40 blocks')
});

export const protocolDraftSchema = z.object({
	format: z.literal(1),
	task: taskDraftSchema,
	arms: z
		.array(z.object({ key: text(31), name: text(60), rule: z.enum(['adaptive', 'fixed']) }))
		.min(1)
		.max(6, 'A study has at most 6 arms'),
	visits: z.array(visitDraftSchema).max(40, 'A protocol has at most 40 visits'),
	booking: z.object({
		/** Clock times, such as 08:30. */
		earliest: text(5),
		latest: text(5),
		sameTimeToleranceMinutes: number,
		weekdays: z.array(z.number().int().min(1).max(7)),
		pauses: z.object({ count: number, minHours: number, maxHours: number })
	}),
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
	limits: z.object({ minutesPerVisit: number, trialsPerVisit: number }),
	consentTextVersion: text(40),
	variants: z.array(z.string())
});

export type ProtocolDraft = z.infer<typeof protocolDraftSchema>;
export type VisitDraft = ProtocolDraft['visits'][number];
export type TaskDraft = ProtocolDraft['task'];
export type VariableDraft = TaskDraft['formula']['variables'][number];
export type GapDraft = VisitDraft['gapBefore'];

/** The assumptions of the comparison whose source and author the power page names. */
export const assumptionFields = [
	'effectD',
	'peopleLostShare',
	'effectLostShare',
	'alpha',
	'peoplePerArm'
] as const;
export type AssumptionField = (typeof assumptionFields)[number];

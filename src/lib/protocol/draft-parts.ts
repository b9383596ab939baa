import { z } from 'zod';
import { ORPHAN_RULES, LATE_RULES } from '$scheduler/policies/yoking/yoked-rule';
import { FEEDBACKS } from '$scheduler/policies/obligation-settings';
import { EVENT_STRATEGIES, INTERCURRENT_EVENTS } from '$scheduler/protocol/analysis-plan';
import { BLOCK_PURPOSES } from '$scheduler/protocol/block-plan';
import { DAY_MEANINGS, MISSED_DAY_RULES, RELAXABLE_RULES } from '$scheduler/protocol/booking-rules';
import { ARM_RULES } from '$scheduler/protocol/protocol-content';

/**
 * Parts of a version that is still being written. A number that is not typed yet is null, texts may be
 * empty; a part that came later has a default, so that older drafts open.
 */

export const draftNumber = z.number().nullable();
export const draftText = (max: number) => z.string().max(max, `Longer than ${max} characters`);

export const blockDraftSchema = z.object({
	purpose: z.enum(BLOCK_PURPOSES),
	trials: draftNumber,
	restMinutes: draftNumber.default(null),
	warmUpTrials: draftNumber.default(null),
	restBetweenTrialsSeconds: draftNumber.default(null),
	restAfterMinutes: draftNumber.default(null),
	instruction: draftText(40).default(''),
	feedback: z.enum(FEEDBACKS).nullable().default(null),
	targetOffset: draftNumber.default(null),
	region: z
		.object({ center: z.array(draftNumber).max(12), halfWidth: z.array(draftNumber).max(12) })
		.nullable()
		.default(null),
	shift: z.object({ from: draftNumber, to: draftNumber }).nullable().default(null)
});

const blocks = z.array(blockDraftSchema).max(40, 'A visit has at most 40 blocks');

export const gapDraftSchema = z.object({
	minHours: draftNumber,
	targetHours: draftNumber,
	maxHours: draftNumber,
	nightsBetween: draftNumber
});

export const visitDraftSchema = z.object({
	label: draftText(40),
	kind: z.enum(['baseline', 'practice', 'retention']),
	minutes: draftNumber,
	setupMinutes: draftNumber,
	cleanupMinutes: draftNumber,
	/** Not used for the first visit; kept in case it moves down. */
	gapBefore: gapDraftSchema,
	/** The blocks of every arm without a list of its own. */
	blocks,
	/** Lists of single arms, by their key. */
	armBlocks: z.record(z.string(), blocks).default({})
});

export const armDraftSchema = z.object({
	key: draftText(31),
	name: draftText(60),
	rule: z.enum(ARM_RULES),
	/** Key of the arm that a yoked arm follows. */
	master: draftText(31).nullable().default(null)
});

export const bookingDraftSchema = z.object({
	/** Clock times, such as 08:30. */
	earliest: draftText(5),
	latest: draftText(5),
	sameTimeToleranceMinutes: draftNumber,
	weekdays: z.array(z.number().int().min(1).max(7)),
	pauses: z.object({ count: draftNumber, minHours: draftNumber, maxHours: draftNumber }),
	dayMeaning: z.enum(DAY_MEANINGS).default('elapsed-hours')
});

export const yokingDraftSchema = z.object({
	leadHours: draftNumber,
	orphan: z.enum(ORPHAN_RULES),
	late: z.enum(LATE_RULES)
});

export const missedDayDraftSchema = z.object({
	rule: z.enum(MISSED_DAY_RULES),
	withinHours: draftNumber,
	mostMissed: draftNumber
});

export const relaxationDraftSchema = z.object({
	rule: z.enum(RELAXABLE_RULES),
	by: draftNumber,
	price: draftNumber
});

export const instructionDraftSchema = z.object({ version: draftText(40), text: draftText(5000) });

export const limitsDraftSchema = z.object({
	minutesPerVisit: draftNumber,
	trialsPerVisit: draftNumber,
	/** By the name of the execution variable. */
	variableMax: z.record(z.string(), draftNumber).default({}),
	shiftMax: draftNumber.default(null),
	penaltyShareMax: draftNumber.default(null)
});

export const analysisDraftSchema = z.object({
	outcomes: z
		.array(
			z.object({
				name: draftText(200),
				unit: draftText(32),
				rank: z.enum(['primary', 'secondary', 'exploratory']),
				visitNumber: draftNumber
			})
		)
		.max(40, 'At most 40 outcomes'),
	estimand: z.object({
		population: draftText(1000),
		treatment: draftText(1000),
		variable: draftText(500),
		events: z
			.array(z.object({ event: z.enum(INTERCURRENT_EVENTS), strategy: z.enum(EVENT_STRATEGIES) }))
			.max(20),
		summary: draftText(500)
	}),
	analysis: draftText(5000),
	exclusions: draftText(5000),
	stoppingRules: draftText(5000),
	interimLooks: z.array(draftNumber).max(8, 'At most 8 interim looks')
});

export type BlockDraft = z.infer<typeof blockDraftSchema>;
export type VisitDraft = z.infer<typeof visitDraftSchema>;
export type GapDraft = z.infer<typeof gapDraftSchema>;
export type ArmDraft = z.infer<typeof armDraftSchema>;
export type AnalysisDraft = z.infer<typeof analysisDraftSchema>;
export type RelaxationDraft = z.infer<typeof relaxationDraftSchema>;

import { z } from 'zod';
import { yokingSettingsSchema } from '../policies/yoking/yoked-rule.ts';
import { analysisPlanSchema } from './analysis-plan.ts';
import { bookingRulesSchema, missedDaySchema, relaxationStepSchema } from './booking-rules.ts';
import { hours } from './hours.ts';
import { visitPlanSchema } from './visit-plan.ts';

/**
 * Content of a protocol version, format 1: everything the study obeys, frozen as one document. Parts that
 * came later are optional, so that the text and the hash of older versions stay what they are.
 */

export const ARM_RULES = ['adaptive', 'fixed', 'yoked'] as const;

export const armSchema = z
	.object({
		key: z.string().regex(/^[a-z][a-z0-9-]{0,30}$/),
		name: z.string().min(1).max(60),
		/** adaptive: the policy chooses each block; fixed: every block is the protocol's own; yoked: each
		 * block of adaptive time repeats what a partner in the master arm was given. */
		rule: z.enum(ARM_RULES),
		/** Key of the arm that a yoked arm follows. */
		master: z.string().optional()
	})
	.refine(({ rule, master }) => (rule === 'yoked') === (master !== undefined), {
		message: 'A yoked arm, and no other, names the arm it follows',
		path: ['master']
	});

export const guardRailsSchema = z.object({
	/** A region covering more of the traced zero-error line than this is held for the approver. */
	automaticCoverMax: z.number().min(0).max(1),
	/** A region whose way out is further than this (own SDs along the line) is held. */
	automaticReachSdMax: z.number().min(0).max(20),
	/** What runs when a held decision is not settled by its hour. */
	fallback: z.literal('practice')
});

const comparisonSchema = z.object({
	outcome: z.string().max(200),
	armA: z.string(),
	armB: z.string(),
	effectD: z.number().min(0.01).max(5),
	effectSource: z.string().max(500),
	peopleLostSource: z.string().max(500).optional(),
	effectLostSource: z.string().max(500).optional(),
	/** Who entered each assumption last, by its field's name. */
	enteredBy: z.record(z.string(), z.string().max(200)).optional(),
	alpha: z.number().min(0.0001).max(0.5),
	sides: z.union([z.literal(1), z.literal(2)]),
	peoplePerArm: z.number().int().min(2).max(5000),
	peopleLostShare: z.number().min(0).max(0.95),
	effectLostShare: z.number().min(0).max(0.95)
});

export const limitsSchema = z.object({
	minutesPerVisit: z.number().int().min(1).max(600),
	trialsPerVisit: z.number().int().min(1).max(20000),
	/** Largest values that may be asked of an execution variable (a force, a speed), by its name. */
	variableMax: z.record(z.string(), z.number().positive()).optional(),
	/** Largest distance by which a target may be moved, in the unit of the result. */
	shiftMax: z.number().positive().optional(),
	/** Largest share of a person's own trials that a penalized region may catch. */
	penaltyShareMax: z.number().gt(0).lte(1).optional()
});

export const protocolContentSchema = z.object({
	format: z.literal(1),
	task: z.record(z.string(), z.unknown()),
	arms: z.array(armSchema).min(1).max(6),
	visits: z.array(visitPlanSchema).min(1).max(40),
	booking: bookingRulesSchema,
	/** Settings of the policy that differ from the engine's defaults (aims, limits, settle ...). */
	policy: z.record(z.string(), z.unknown()),
	guardRails: guardRailsSchema,
	/** Decisions are due, and blocks become ready, this many hours before the visit, in every arm. */
	readyLeadHours: z.number().min(0).max(72),
	/** Invitations of the visits after baseline leave this many hours after the baseline visit. */
	invitationDelayHours: z
		.number()
		.min(0)
		.max(24 * 14),
	/** Range of hours after allocation from which everybody's earliest start is drawn. */
	earliestStartHours: z.object({ min: hours, max: hours }),
	/** The primary comparison; null in a study of one arm, which compares nothing. */
	comparison: comparisonSchema.nullable(),
	limits: limitsSchema,
	consentTextVersion: z.string().min(1).max(40),
	variants: z.array(z.string()),
	/** Seconds that a trial lasts with everything that belongs to it, without the rest after it. */
	trialSeconds: z.number().positive().max(600).optional(),
	/** How a yoked arm follows its master arm. */
	yoking: yokingSettingsSchema.optional(),
	missedDay: missedDaySchema.optional(),
	/** Rules that may give way when no chain of visits fits, in this order, the same for all arms. */
	relaxation: z.array(relaxationStepSchema).max(12).optional(),
	/** Texts that are read to people, by version. */
	instructions: z
		.array(z.object({ version: z.string().min(1).max(40), text: z.string().max(5000) }))
		.max(40)
		.optional(),
	analysis: analysisPlanSchema.optional(),
	/** Why a finding of the checker stays as it is, by the finding's key. */
	justifications: z.record(z.string(), z.string().min(1).max(1000)).optional()
});

export type ProtocolContent = z.infer<typeof protocolContentSchema>;
export type Arm = z.infer<typeof armSchema>;

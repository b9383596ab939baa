import { z } from 'zod';

/** Content of a protocol version, format 1: everything the study obeys, frozen as one document. */

const hours = z
	.number()
	.min(0)
	.max(24 * 365);
const minuteOfDay = z
	.number()
	.int()
	.min(0)
	.max(24 * 60);

export const gapRuleSchema = z
	.object({
		minHours: hours,
		targetHours: hours,
		maxHours: hours,
		nightsBetween: z.number().int().min(0).max(60)
	})
	.refine((gap) => gap.minHours <= gap.targetHours && gap.targetHours <= gap.maxHours, {
		message: 'Hours must rise: shortest, wanted, longest'
	});

export const blockPlanSchema = z.object({
	number: z.number().int().min(1),
	/** baseline and retention blocks are plain; adaptive time is filled by the arm's rule. */
	purpose: z.enum(['baseline', 'adaptive', 'retention']),
	trials: z.number().int().min(1).max(5000)
});

export const visitPlanSchema = z.object({
	number: z.number().int().min(1),
	label: z.string().min(1).max(40),
	kind: z.enum(['baseline', 'practice', 'retention']),
	minutes: z.number().int().min(5).max(600),
	setupMinutes: z.number().int().min(0).max(240),
	cleanupMinutes: z.number().int().min(0).max(240),
	/** Hours since the visit before; null for the first visit. */
	gapBefore: gapRuleSchema.nullable(),
	blocks: z.array(blockPlanSchema).min(1).max(40)
});

export const armSchema = z.object({
	key: z.string().regex(/^[a-z][a-z0-9-]{0,30}$/),
	name: z.string().min(1).max(60),
	/** adaptive: the policy chooses each block; fixed: every block is the protocol's own. */
	rule: z.enum(['adaptive', 'fixed'])
});

export const guardRailsSchema = z.object({
	/** A region covering more of the traced zero-error line than this is held for the approver. */
	automaticCoverMax: z.number().min(0).max(1),
	/** A region whose way out is further than this (own SDs along the line) is held. */
	automaticReachSdMax: z.number().min(0).max(20),
	/** What runs when a held decision is not settled by its hour. */
	fallback: z.literal('practice')
});

export const protocolContentSchema = z.object({
	format: z.literal(1),
	task: z.record(z.string(), z.unknown()),
	arms: z.array(armSchema).min(1).max(6),
	visits: z.array(visitPlanSchema).min(1).max(40),
	booking: z.object({
		earliestMinute: minuteOfDay,
		latestMinute: minuteOfDay,
		/** Starts may differ from the first practice visit's clock time by this much. */
		sameTimeToleranceMinutes: z.number().int().min(0).max(720),
		/** ISO weekdays, 1 is Monday. */
		weekdays: z.array(z.number().int().min(1).max(7)).min(1),
		/** Longer gaps a chain may hold, such as one weekend. */
		pauses: z.object({
			count: z.number().int().min(0).max(10),
			minHours: hours,
			maxHours: hours
		})
	}),
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
	comparison: z
		.object({
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
		})
		.nullable(),
	limits: z.object({
		minutesPerVisit: z.number().int().min(1).max(600),
		trialsPerVisit: z.number().int().min(1).max(20000)
	}),
	consentTextVersion: z.string().min(1).max(40),
	variants: z.array(z.string())
});

export type ProtocolContent = z.infer<typeof protocolContentSchema>;
export type VisitPlan = z.infer<typeof visitPlanSchema>;
export type Arm = z.infer<typeof armSchema>;
export type GapRule = z.infer<typeof gapRuleSchema>;

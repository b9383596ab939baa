import { z } from 'zod';
import { placementSettingsSchema } from '../perturbations/region-settings.ts';
import { shiftSettingsSchema, Z_ONE_SIDED_95 } from '../perturbations/shift-rule.ts';
import { obligationSchema } from './obligation-settings.ts';

const count = z.number().int().nonnegative();
const trials = z.number().int().min(1).max(2000);
const ratio = z.number().min(0).max(1);

/** When a person must stop or rest. Ratings run from 0 to 10. */
const limitsSchema = z.strictObject({
	pain: z.number().min(0).max(10).default(4),
	fatigue: z.number().min(0).max(10).default(7),
	trialsPerDay: trials.default(300),
	/** A shift is taken back when success falls below this share of the last successWindow trials. */
	successMin: ratio.default(0.2),
	successWindow: trials.default(30)
});

/** What practice is for: share of the perturbed trials, and when the aim is met. */
const aimsSchema = z
	.strictObject({
		region: z.strictObject({ share: z.number().positive(), escapes: count.default(0) }).optional(),
		/** goal: how far the target is moved, in SD of the person's own result. */
		shift: z
			.strictObject({
				share: z.number().positive(),
				goal: z.number().refine((goal) => goal !== 0, { error: 'a goal of 0 is no shift' })
			})
			.optional()
	})
	.refine(({ region, shift }) => region !== undefined || shift !== undefined, {
		error: 'a protocol needs at least one aim'
	});

const settleSchema = z.strictObject({
	minBlocks: count.min(1).default(3),
	/** Last plain blocks that are looked at. */
	use: count.min(1).default(4),
	maxBlocks: count.min(1).default(6),
	/** Change of the mean error, in SD of a trial, that counts as none. */
	margin: z.number().positive().default(0.5),
	z: z.number().positive().default(Z_ONE_SIDED_95)
});

const bandSchema = z.strictObject({
	q1: ratio.default(0.99),
	q2: ratio.default(0.999),
	/** Own SD by which the means of blocks may wander without being called a change. */
	wander: z.number().nonnegative().default(0.15)
});

const regionRunSchema = z.strictObject({
	maxBlocks: count.min(1).default(3),
	/** Relative escape from which a region counts as escaped. */
	relativeEscape: ratio.default(0.3),
	window: trials.default(40),
	z: z.number().positive().default(Z_ONE_SIDED_95),
	maxFailed: count.min(1).default(3)
});

const shiftRunSchema = z.strictObject({
	maxBlocks: count.min(1).default(6),
	/** Plain trials needed before the spread of the result counts as known. */
	minPlain: trials.default(100),
	rule: shiftSettingsSchema.prefault({})
});

/**
 * The whole adaptive policy of a protocol (method sheet D0 to D4): every value has the product default,
 * an unknown name is refused. Parse once, freeze the output with the protocol version.
 */
export const policySettingsSchema = z.strictObject({
	place: placementSettingsSchema.prefault({}),
	/** Trials of a block by its kind. */
	blockTrials: trials.default(60),
	probeTrials: trials.default(40),
	washoutTrials: trials.default(60),
	retentionTrials: trials.default(40),
	recoveryTrials: trials.default(40),
	limits: limitsSchema.prefault({}),
	aims: aimsSchema.default({
		region: { share: 0.5, escapes: 3 },
		shift: { share: 0.5, goal: 3 }
	}),
	settle: settleSchema.prefault({}),
	band: bandSchema.prefault({}),
	/** Part of a block by which an aim must lag before the other is left for it. */
	hysteresis: z.number().nonnegative().default(0.5),
	/** Plain blocks and trials after a region or shift. */
	cool: z.strictObject({ blocks: count.default(1), trials: count.default(40) }).prefault({}),
	region: regionRunSchema.prefault({}),
	shift: shiftRunSchema.prefault({}),
	/** Perturbed blocks between two probes. */
	probeEvery: count.min(1).default(6),
	retentionDays: z.array(count).default([]),
	retentionGapHours: z.number().nonnegative().default(20),
	/** What is kept of a shift after a gap: floor + (1 − floor)·exp(−gap / tauHours). */
	forget: z
		.strictObject({
			tauHours: z.number().positive().default(120),
			floor: ratio.default(0.2),
			/**
			 * Whether a gap also counts when another block comes first after it; left out: only where the
			 * protocol declares obligations.
			 */
			beforeAnyBlock: z.boolean().optional()
		})
		.prefault({}),
	/** Drift between the first and last third, in own SD, below which a second drifting block is used. */
	driftKeepSd: z.number().positive().default(1.5),
	alignMaxDeg: z.number().min(0).max(90).default(60),
	ratioAcross: z.number().min(1).default(2),
	ratioMin: z.number().min(1).default(1.3),
	/** Distances by which a region may lean, in own SD along the manifold. */
	lean: z.array(z.number().positive()).max(12).default([0.25, 0.5, 0.75, 1]),
	leanCatch: ratio.default(0.4),
	oscillation: z
		.strictObject({ window: count.min(3).default(8), returns: count.min(1).default(3) })
		.prefault({}),
	/** Blocks in a row without any challenge after which a person must look. */
	stuck: count.min(1).default(3),
	/** Blocks that are due whatever the policy would choose, in the order in which they come. */
	obligations: z.array(obligationSchema).max(20).optional(),
	/** What is run while a person must look; left out: nothing. Needed where operators are blinded. */
	holdFallback: z.enum(['practice', 'maintenance']).optional(),
	/** A washout lasts at least so many of the person's own longest holds; left out: washoutTrials. */
	washoutHolds: z.number().positive().max(10).optional()
});

export type PolicySettings = z.output<typeof policySettingsSchema>;
export type PolicySettingsInput = z.input<typeof policySettingsSchema>;

/** The product defaults. */
export const POLICY_DEFAULTS: PolicySettings = policySettingsSchema.parse({});

/** Gives every kind of block the same count of trials, as blinded operators need. */
export function equaliseBlockLengths(settings: PolicySettings): PolicySettings {
	const { blockTrials } = settings;
	return {
		...settings,
		probeTrials: blockTrials,
		washoutTrials: blockTrials,
		retentionTrials: blockTrials,
		recoveryTrials: blockTrials
	};
}

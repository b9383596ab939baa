import { z } from 'zod';
import { regionSchema } from '../perturbations/region-settings.ts';
import { shiftRuleSchema, shiftStateSchema } from '../perturbations/shift-rule.ts';
import { FEEDBACKS, obligationMemorySchema } from './obligation-settings.ts';

const count = z.number().int().nonnegative();
const vector = z.array(z.number());
const matrix = z.array(vector);

/** Kinds of block a rig can run. */
export const EXECUTED_KINDS = [
	'baseline',
	'practice',
	'region',
	'shift',
	'probe',
	'washout',
	'retention',
	'recovery',
	'maintenance',
	'clamp',
	'transfer',
	'rest'
] as const;
/** Kinds that a decision can name: the executed ones, to stop, to hold for a person, to wait for a yoked master. */
export const DECISION_KINDS = [...EXECUTED_KINDS, 'stop', 'hold', 'wait'] as const;

/** What a plain block showed. mean, cov: scaled; cost, fMean, fSd: result unit; hit, r: ratios. */
export const blockSummarySchema = z.strictObject({
	n: z.number().positive(),
	mean: vector,
	cov: matrix,
	/** Mean and SD of the absolute result. */
	cost: z.number(),
	costSd: z.number(),
	/** Mean and robust detrended SD of the signed result. */
	fMean: z.number(),
	fSd: z.number(),
	hit: z.number(),
	/** Lag-1 correlation. */
	r: z.number()
});

/** Blocks pooled into the cloud that later ones are compared with. */
export const referenceSchema = z.strictObject({
	n: z.number().positive(),
	blocks: count,
	mean: vector,
	cov: matrix,
	r: z.number()
});

/** Everything a block needs to be run. */
export const blockParametersSchema = z.strictObject({
	trials: count.optional(),
	region: regionSchema.optional(),
	blockOfRegion: count.optional(),
	rule: shiftRuleSchema.optional(),
	state: shiftStateSchema.optional(),
	level: z.number().optional(),
	firstStep: z.number().optional(),
	step: z.number().optional(),
	granularity: z.enum(['trial', 'block']).optional(),
	hold: count.optional(),
	/** Share of the level expected to be kept over the gap. */
	retained: z.number().optional(),
	/** Yoked shift: the level of each trial, as the master's rule set it. */
	levels: z.array(z.number()).optional(),
	/** Place of the obligation that this block fulfils in the protocol's list. */
	obligation: count.optional(),
	feedback: z.enum(FEEDBACKS).optional(),
	/** SD of the noise that is shown where feedback is clamped to noise, in the unit of the result. */
	clampSd: z.number().optional(),
	/** Transfer: where the target lies beside its usual place, in the unit of the result. */
	targetOffset: z.number().optional(),
	/** A hold: what is run until a person has looked. */
	fallback: z.strictObject({ kind: z.enum(EXECUTED_KINDS), trials: count }).optional()
});

const planSchema = z.strictObject({
	kind: z.enum(DECISION_KINDS),
	parameters: blockParametersSchema
});

const activeSchema = z.discriminatedUnion('kind', [
	z.strictObject({ kind: z.literal('region'), blocks: count, trials: count, region: regionSchema }),
	z.strictObject({
		kind: z.literal('shift'),
		blocks: count,
		trials: count,
		rule: shiftRuleSchema,
		state: shiftStateSchema.nullable(),
		/** The state before a gap was taken into account; null: no block since, or no gap. */
		beforeGap: shiftStateSchema.nullable().default(null)
	})
]);

const aimName = z.enum(['region', 'shift']);

const recentSchema = z.array(z.strictObject({ kind: z.enum(DECISION_KINDS), why: z.string() }));

/** What the selector remembers about one person between blocks; empty at the start. */
export const policyMemorySchema = z.strictObject({
	plain: z.array(blockSummarySchema).default([]),
	results: z
		.array(blockSummarySchema.omit({ mean: true, cov: true, cost: true, costSd: true }))
		.default([]),
	settled: z.boolean().default(false),
	ref: referenceSchema.nullable().default(null),
	cloud: blockSummarySchema.nullable().default(null),
	suspect: z.union([z.literal(0), z.literal(1)]).default(0),
	offer: planSchema.nullable().default(null),
	active: activeSchema.nullable().default(null),
	cool: z.strictObject({ blocks: count, trials: count }).default({ blocks: 0, trials: 0 }),
	shareCap: z.number().nullable().default(null),
	lastShare: z.number().nullable().default(null),
	done: z
		.strictObject({
			region: count,
			shift: count,
			escapes: count,
			held: z.boolean(),
			frozen: z.boolean(),
			failed: count
		})
		.default({ region: 0, shift: 0, escapes: 0, held: false, frozen: false, failed: 0 }),
	lastChallenge: aimName.nullable().default(null),
	avoid: aimName.nullable().default(null),
	sinceProbe: count.default(0),
	due: z
		.array(
			z.strictObject({
				kind: z.enum(DECISION_KINDS),
				why: z.string(),
				obligation: count.optional(),
				trials: count.optional()
			})
		)
		.default([]),
	recover: z.string().nullable().default(null),
	driftRun: count.default(0),
	noChallenge: count.default(0),
	rested: z.boolean().default(false),
	held: z.string().nullable().default(null),
	stuckSeen: z.boolean().default(false),
	recent: recentSchema.default([]),
	planned: planSchema.nullable().default(null),
	changed: z.boolean().default(false),
	lastGates: z.array(z.string()).default([]),
	whyProbe: z.array(z.string()).default([]),
	/** recent and noChallenge as the last block left them, so that asking twice counts once. */
	sinceBlock: z.strictObject({ recent: recentSchema, noChallenge: count }).nullable().default(null),
	/** Yoked arms: the perturbation of the last block; null: it had none. */
	yokedLevel: planSchema.nullable().optional(),
	/** Only where the protocol declares obligations. */
	obligations: obligationMemorySchema.optional(),
	/** Hours without a block that a running shift has not yet been taken back for, up to a day. */
	pendingGap: z.strictObject({ day: count, hours: z.number().nonnegative() }).optional()
});

export type ExecutedKind = (typeof EXECUTED_KINDS)[number];
export type DecisionKind = (typeof DECISION_KINDS)[number];
export type AimName = z.output<typeof aimName>;
export type BlockSummary = z.output<typeof blockSummarySchema>;
export type ReferenceCloud = z.output<typeof referenceSchema>;
export type BlockParameters = z.output<typeof blockParametersSchema>;
export type BlockPlan = z.output<typeof planSchema>;
export type ActiveBlock = z.output<typeof activeSchema>;
export type PolicyMemory = z.output<typeof policyMemorySchema>;

/** The memory of a person about whom nothing is known yet. */
export function createEmptyMemory(): PolicyMemory {
	return policyMemorySchema.parse({});
}

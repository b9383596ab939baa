import { z } from 'zod';

/** One-sided 95 % point of the normal distribution. */
export const Z_ONE_SIDED_95 = 1.6448536269514722;

const count = z.number().int().nonnegative();
const ratio = z.number().min(0).max(1);

/** What a protocol may set about a target shift (method sheet D3). Sd: SD of the signed result. */
export const shiftSettingsSchema = z.strictObject({
	firstStepSd: z.number().positive().default(1),
	stepSd: z.number().positive().default(0.5),
	/** No step is larger: changes above 1.5 SD are noticed. */
	stepCapSd: z.number().positive().max(1.5).default(1),
	/** Trials of a hold before its first look, between looks, and until the softer rule counts. */
	holdMin: count.min(2).default(12),
	lookEvery: count.min(1).default(4),
	holdMax: count.min(2).default(20),
	/** Trials beyond holdMax until a level counts as not followed. */
	grace: count.default(12),
	z: z.number().positive().default(Z_ONE_SIDED_95),
	followedLowMin: ratio.default(0.2),
	followedMin: ratio.default(0.7),
	followedLateMin: ratio.default(0.5),
	/** Success in the last ten trials below which the level is taken back. */
	hitMin: ratio.default(0.3),
	/** 'block': the level stays within a block and is looked at once, at its end. */
	granularity: z.enum(['trial', 'block']).default('trial'),
	/** Whether holdMax is fitted to the person. */
	personal: z.boolean().default(true)
});

/** A rule ready to run: the settings with the person's own spread. Result unit: that of the task. */
export const shiftRuleSchema = shiftSettingsSchema.extend({
	/** SD of the signed result. */
	sigma: z.number().positive(),
	/** Level to reach, signed. */
	goal: z.number(),
	/** Mean signed error (target less result) without a shift. */
	bias: z.number().default(0),
	/** Lag-1 correlation of the signed result. */
	r: z.number().min(-0.99).max(0.99).default(0),
	/** Trials behind sigma, bias and r; null: taken as known. */
	n0: z.number().positive().nullable().default(null),
	/** Share of hits without a shift. */
	hit0: ratio.default(1)
});

/** What a running rule remembers between trials; carried by the bundle and returned by the rig. */
export const shiftStateSchema = z.strictObject({
	theta: z.number(),
	passed: z.number(),
	previous: z.number(),
	hold: count,
	errors: z.array(z.number()),
	hits: z.array(z.boolean()),
	stalls: count,
	status: z.enum(['run', 'done', 'frozen']),
	trial: count,
	holdMax: count,
	/** Lower end, best value and upper end of the fitted learning rate; empty before it was fitted. */
	rate: z.array(z.number()),
	/** Holds behind the fit: step and errors less bias. */
	fit: z.array(z.strictObject({ step: z.number(), errors: z.array(z.number()) })),
	holds: count
});

export type ShiftSettings = z.output<typeof shiftSettingsSchema>;
export type ShiftRule = z.output<typeof shiftRuleSchema>;
export type ShiftState = z.output<typeof shiftStateSchema>;

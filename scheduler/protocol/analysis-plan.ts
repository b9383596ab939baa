import { z } from 'zod';

/** How an event after allocation is dealt with (ICH E9(R1) addendum on estimands). */
export const EVENT_STRATEGIES = [
	'treatment-policy',
	'hypothetical',
	'composite',
	'while-on-treatment',
	'principal-stratum'
] as const;

/** Events that the record can recognise by itself, so that each is tagged when it happens. */
export const INTERCURRENT_EVENTS = [
	'missed-practice-day',
	'withdrawal-from-practice',
	'withdrawal-from-study',
	'adverse-event-pause',
	'fallback-block',
	'rule-overridden',
	'rig-failure'
] as const;

export const estimandSchema = z.object({
	population: z.string().max(1000),
	treatment: z.string().max(1000),
	variable: z.string().max(500),
	events: z
		.array(z.object({ event: z.enum(INTERCURRENT_EVENTS), strategy: z.enum(EVENT_STRATEGIES) }))
		.max(20),
	summary: z.string().max(500)
});

export const outcomeSchema = z.object({
	name: z.string().min(1).max(200),
	unit: z.string().max(32),
	rank: z.enum(['primary', 'secondary', 'exploratory']),
	/** Number of the visit at which it is taken. */
	visitNumber: z.number().int().min(1)
});

/** What is measured and how it is analysed, written before the first person. */
export const analysisPlanSchema = z.object({
	outcomes: z.array(outcomeSchema).max(40),
	estimand: estimandSchema,
	analysis: z.string().max(5000),
	exclusions: z.string().max(5000),
	stoppingRules: z.string().max(5000),
	/** Shares of the planned people after which an interim look is taken, rising. */
	interimLooks: z.array(z.number().gt(0).lt(1)).max(8)
});

export type AnalysisPlan = z.infer<typeof analysisPlanSchema>;
export type Estimand = z.infer<typeof estimandSchema>;

import { z } from 'zod';
import { hours } from './hours.ts';

const minuteOfDay = z
	.number()
	.int()
	.min(0)
	.max(24 * 60);

/** How gaps are read where a clock change lies between two visits. */
export const DAY_MEANINGS = ['elapsed-hours', 'clock-time'] as const;

export const bookingRulesSchema = z.object({
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
	}),
	/**
	 * elapsed-hours (also where left out): 24 h are 24 h, so the clock time moves by one hour over a clock
	 * change; clock-time: 24 h mean the same clock time on the next day, so 23 or 25 h may elapse.
	 */
	dayMeaning: z.enum(DAY_MEANINGS).optional()
});

/** What is done about a practice day that was missed. */
export const MISSED_DAY_RULES = ['make-up', 'shift-chain', 'stop-practice'] as const;

export const missedDaySchema = z.object({
	/** make-up: run it within so many hours, later visits stay; shift-chain: all later visits move;
	 * stop-practice: no more practice, retention and transfer take place all the same. */
	rule: z.enum(MISSED_DAY_RULES),
	withinHours: hours,
	/** Practice days a person may miss before they count as withdrawn from practice. */
	mostMissed: z.number().int().min(0).max(20)
});

/** Rules that may give way when no chain fits. */
export const RELAXABLE_RULES = [
	'gap-longest',
	'gap-shortest',
	'same-time',
	'clock-window',
	'weekdays',
	'pauses'
] as const;

/** A step of the ladder: which rule gives way, how far, and what that costs beside other steps. */
export const relaxationStepSchema = z.object({
	rule: z.enum(RELAXABLE_RULES),
	/** Hours for gaps, minutes for clock times, counts for weekdays and pauses. */
	by: z.number().positive().max(10_000),
	price: z.number().min(0).max(1000)
});

export type BookingRules = z.infer<typeof bookingRulesSchema>;
export type MissedDay = z.infer<typeof missedDaySchema>;
export type RelaxationStep = z.infer<typeof relaxationStepSchema>;

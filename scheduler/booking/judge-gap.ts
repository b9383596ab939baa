import { mergeIntervals } from './intervals.ts';
import { HOUR_MS } from './local-date.ts';
import type { GapRule, Interval } from './types.ts';

/** A start with its local time in the lab's zone. */
export type LocalStart = { startMs: number; dayNumber: number; minute: number };

/** Hours from start to start, as the rule means them. */
export function hoursBetween(rule: GapRule, from: LocalStart, to: LocalStart): number {
	if (rule.hoursMean !== 'clock') return (to.startMs - from.startMs) / HOUR_MS;
	return (to.dayNumber - from.dayNumber) * 24 + (to.minute - from.minute) / 60;
}

/** Whether a gap keeps the hours of its rule, and how. Nights are looked at apart. */
export function classifyGap(rule: GapRule, hours: number): 'within' | 'pause' | 'outside' {
	if (hours >= rule.minHours && hours <= rule.maxHours) return 'within';
	const { count, minHours, maxHours } = rule.allowedPauses;
	return count > 0 && hours >= minHours && hours <= maxHours ? 'pause' : 'outside';
}

/**
 * Stretches of real time after a start in which its gap can keep the rule, in order. With hours by
 * the clock they are three hours wider on each side: clocks may have moved.
 */
export function listGapSpans(rule: GapRule, canPause: boolean): Interval[] {
	const slackHours = rule.hoursMean === 'clock' ? 3 : 0;
	const ranges = canPause ? [rule, rule.allowedPauses] : [rule];
	return mergeIntervals(
		ranges.map(({ minHours, maxHours }) => ({
			fromMs: (minHours - slackHours) * HOUR_MS,
			// Half open, and the longest gap itself is allowed.
			toMs: (maxHours + slackHours) * HOUR_MS + 1
		}))
	);
}

import { HOUR_MS } from './local-date.ts';
import type { GapRule } from './types.ts';

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

/** Real time after which no gap can keep the rule; clocks may have moved by up to three hours. */
export function longestGapMs(rule: GapRule): number {
	const { count, maxHours } = rule.allowedPauses;
	const hours = count > 0 ? Math.max(rule.maxHours, maxHours) : rule.maxHours;
	return (hours + (rule.hoursMean === 'clock' ? 3 : 0)) * HOUR_MS;
}

/** Real time before which no gap can keep the rule. */
export function shortestGapMs(rule: GapRule): number {
	const { count, minHours } = rule.allowedPauses;
	const hours = count > 0 ? Math.min(rule.minHours, minHours) : rule.minHours;
	return (hours - (rule.hoursMean === 'clock' ? 3 : 0)) * HOUR_MS;
}

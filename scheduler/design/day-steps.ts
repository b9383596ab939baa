import { classifyGap } from '../booking/judge-gap.ts';
import type { GapRule } from '../booking/types.ts';

/** One gap of a chain of visits, as the calendar judges it. */
export interface ChainGap {
	readonly rule: Pick<GapRule, 'minHours' | 'maxHours' | 'nightsBetween'>;
	/** The first visit of a chain that starts at about the same time each day: any clock time may follow. */
	readonly isAnchor: boolean;
	/** Whether it may be one of the chain's longer gaps: only before a practice visit. */
	readonly mayPause: boolean;
}

export interface ChainRules {
	/** Minutes of the clock within which a visit may start, and apart from the first of the same times. */
	readonly windowMinutes: number;
	readonly toleranceMinutes: number;
	/** ISO weekdays, 1 is Monday. */
	readonly weekdays: readonly number[];
	readonly pauses: { readonly count: number; readonly minHours: number; readonly maxHours: number };
	/** Whether a gap over a clock change has an hour more or less than the clocks show. */
	readonly countsElapsed: boolean;
}

export const SLOT_MINUTES = 15;
const DAY_SLOTS = (24 * 60) / SLOT_MINUTES;
export const HOUR_SLOTS = 60 / SLOT_MINUTES;
export const WEEK = 7;
export const NEVER = Infinity;

/** Clock times of a chain, in slots about the first of the same times. */
export interface Track {
	readonly from: number;
	readonly to: number;
}

/** Fewest longer gaps used so far, by weekday and slot. */
export type Reached = number[][];

export function createReached({ from, to }: Track): Reached {
	return Array.from({ length: WEEK }, () => Array.from({ length: to - from + 1 }, () => NEVER));
}

interface Stepping {
	readonly gap: ChainGap;
	readonly rules: ChainRules;
	readonly track: Track;
	/** Slots by which less time passes than the clocks show. */
	readonly lostSlots: number;
}

export interface Step {
	readonly fromWeekday: number;
	readonly fromSlot: number;
	readonly days: number;
	readonly weekday: number;
	readonly slot: number;
	readonly pauses: number;
}

export function forEachStep(
	before: Reached,
	{ gap, rules, track, lostSlots }: Stepping,
	visit: (step: Step) => void
): void {
	const width = track.to - track.from;
	const spread = gap.isAnchor ? Math.floor(rules.windowMinutes / SLOT_MINUTES) : width;
	const options = listMoves(gap, rules, { spread, lostSlots });
	for (const [index, day] of before.entries()) {
		for (const [fromSlot, pauses] of day.entries()) {
			if (pauses === NEVER) continue;
			for (const { days, move, isPause } of options) {
				const used = pauses + (isPause ? 1 : 0);
				const slot = gap.isAnchor ? -track.from : fromSlot + move;
				const weekday = ((index + days) % WEEK) + 1;
				const isAllowed = used <= rules.pauses.count && rules.weekdays.includes(weekday);
				if (!isAllowed || slot < 0 || slot > width) continue;
				visit({ fromWeekday: index + 1, fromSlot, days, weekday, slot, pauses: used });
			}
		}
	}
}

/** Whole days and moves of the clock that keep the hours of a gap. */
export function listMoves(
	{ rule, mayPause }: ChainGap,
	rules: Pick<ChainRules, 'pauses'>,
	{ spread, lostSlots }: { spread: number; lostSlots: number }
): { days: number; move: number; isPause: boolean }[] {
	const pauses = mayPause ? rules.pauses : { ...rules.pauses, count: 0 };
	const judged = { ...rule, targetHours: rule.minHours, allowedPauses: pauses };
	const longest = Math.max(rule.maxHours, pauses.count > 0 ? pauses.maxHours : 0);
	const lastDay = Math.ceil((longest * HOUR_SLOTS + spread + lostSlots) / DAY_SLOTS);
	const moves = [];
	for (let days = Math.max(0, rule.nightsBetween); days <= lastDay; days++) {
		for (let move = -spread; move <= spread; move++) {
			const hours = (days * DAY_SLOTS + move - lostSlots) / HOUR_SLOTS;
			const verdict = hours > 0 ? classifyGap(judged, hours) : 'outside';
			if (verdict !== 'outside') moves.push({ days, move, isPause: verdict === 'pause' });
		}
	}
	return moves;
}

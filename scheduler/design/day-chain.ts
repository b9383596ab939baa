import { classifyGap } from '../booking/judge-gap.ts';
import type { GapRule } from '../booking/types.ts';

/** One gap of a chain of visits, as the calendar judges it. */
export interface ChainGap {
	readonly rule: Pick<GapRule, 'minHours' | 'maxHours' | 'nightsBetween'>;
	/** The first visit of a chain that starts at about the same time each day: any clock time may follow. */
	readonly isAnchor: boolean;
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

export type ChainVerdict =
	| { readonly ok: true; readonly clockChangeAt: number | null }
	| { readonly ok: false; readonly gap: number; readonly reason: 'hours' | 'weekdays' };

const SLOT_MINUTES = 15;
const DAY_SLOTS = (24 * 60) / SLOT_MINUTES;
const HOUR_SLOTS = 60 / SLOT_MINUTES;
const WEEK = 7;
/** Clocks change in the night to a Sunday. */
const SUNDAY = 7;
const NEVER = Infinity;

/** Clock times of a chain, in slots about the first of the same times. */
interface Track {
	readonly from: number;
	readonly to: number;
}

/** Fewest longer gaps used so far, by weekday and slot. */
type Reached = number[][];

/**
 * Whether some week lets a whole chain of visits keep its gaps by days and clock: no rigs, no holidays.
 * Says at which gap every chain breaks, or at which one a clock change would break all that cross it.
 *
 * Units:   hours, minutes of the clock, in quarter hours as visits are booked.
 * Method:  the reachable weekdays and clock times, visit by visit, with the fewest longer gaps used; each
 *          gap by the calendar's own judgement. A gap over a clock change is put between what is reachable
 *          from the front and from the back.
 * Source:  method sheet "Booking" 6. Accuracy: day-chain.test.ts, against the calendar's search.
 */
export function findDayChain(gaps: readonly ChainGap[], rules: ChainRules): ChainVerdict {
	let best = -1;
	const broken: (number | null)[] = [];
	for (const track of listTracks(rules)) {
		const forward = reachForward(gaps, rules, track);
		if (forward.length === gaps.length + 1) {
			broken.push(rules.countsElapsed ? findBrokenChange(gaps, rules, { track, forward }) : null);
		}
		best = Math.max(best, forward.length - 1);
	}
	if (broken.length > 0) {
		return { ok: true, clockChangeAt: broken.includes(null) ? null : (broken[0] ?? null) };
	}
	const gap = gaps[best];
	const isFit = gap !== undefined && listDays(gap, rules).length > 0;
	return { ok: false, gap: best, reason: isFit ? 'weekdays' : 'hours' };
}

/** The first of the same times may lie early, late or in the middle of the window. */
function listTracks({ windowMinutes, toleranceMinutes }: ChainRules): Track[] {
	const window = Math.floor(windowMinutes / SLOT_MINUTES);
	const tolerance = Math.floor(toleranceMinutes / SLOT_MINUTES);
	const half = Math.floor(window / 2);
	const [early, late] = [Math.min(tolerance, window), Math.min(tolerance, half)];
	const tracks = [
		{ from: -late, to: Math.min(tolerance, window - half) },
		{ from: 0, to: early },
		{ from: -early, to: 0 }
	];
	return tolerance <= half ? tracks.slice(0, 1) : tracks;
}

function reachForward(gaps: readonly ChainGap[], rules: ChainRules, track: Track): Reached[] {
	const start = createReached(track);
	for (const weekday of rules.weekdays) {
		const day = start[weekday - 1];
		if (day) fillAnchor(day, track, gaps[0]?.isAnchor ?? false);
	}
	const reached = [start];
	for (const gap of gaps) {
		const before = reached.at(-1) ?? start;
		const next = createReached(track);
		forEachStep(before, { gap, rules, track, lostSlots: 0 }, (step) => {
			const day = next[step.weekday - 1];
			if (day) day[step.slot] = Math.min(day[step.slot] ?? NEVER, step.pauses);
		});
		if (!next.some((day) => day.some((pauses) => pauses < NEVER))) return reached;
		reached.push(next);
	}
	return reached;
}

/** Before the anchor any time of the track may be; the anchor itself is the middle of the tolerance. */
function fillAnchor(day: number[], track: Track, isFree: boolean): void {
	for (let slot = 0; slot < day.length; slot++) {
		if (isFree || slot === -track.from) day[slot] = 0;
	}
}

function createReached({ from, to }: Track): Reached {
	return Array.from({ length: WEEK }, () => Array.from({ length: to - from + 1 }, () => NEVER));
}

interface Stepping {
	readonly gap: ChainGap;
	readonly rules: ChainRules;
	readonly track: Track;
	/** Slots by which less time passes than the clocks show. */
	readonly lostSlots: number;
}

interface Step {
	readonly fromWeekday: number;
	readonly fromSlot: number;
	readonly days: number;
	readonly weekday: number;
	readonly slot: number;
	readonly pauses: number;
}

function forEachStep(
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
function listMoves(
	{ rule }: ChainGap,
	{ pauses }: Pick<ChainRules, 'pauses'>,
	{ spread, lostSlots }: { spread: number; lostSlots: number }
): { days: number; move: number; isPause: boolean }[] {
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

/** Days by which the next visit may follow, with the clock moved as far as it may be. */
function listDays(gap: ChainGap, rules: ChainRules): number[] {
	const { windowMinutes, toleranceMinutes } = rules;
	const minutes = gap.isAnchor ? windowMinutes : Math.min(windowMinutes, 2 * toleranceMinutes);
	const spread = Math.floor(minutes / SLOT_MINUTES);
	return listMoves(gap, rules, { spread, lostSlots: 0 }).map(({ days }) => days);
}

/** The first gap that chains cross on an ordinary Sunday, but none on one at which clocks change. */
function findBrokenChange(
	gaps: readonly ChainGap[],
	rules: ChainRules,
	{ track, forward }: { track: Track; forward: readonly Reached[] }
): number | null {
	const backward = reachBackward(gaps, rules, { track, forward });
	for (const [index, gap] of gaps.entries()) {
		const [before, after] = [forward[index], backward[index + 1]];
		if (!before || !after) continue;
		const isCrossed = (lostSlots: number) => {
			let found = false;
			forEachStep(before, { gap, rules, track, lostSlots }, (step) => {
				const rest = after[step.weekday - 1]?.[step.slot] ?? NEVER;
				found ||= crossesSunday(step) && step.pauses + rest <= rules.pauses.count;
			});
			return found;
		};
		const isBroken = !isCrossed(HOUR_SLOTS) || !isCrossed(-HOUR_SLOTS);
		if (isBroken && isCrossed(0)) return index;
	}
	return null;
}

function crossesSunday({ fromWeekday, days }: Step): boolean {
	const untilSunday = (SUNDAY - fromWeekday + WEEK) % WEEK || WEEK;
	return days >= untilSunday;
}

/** Fewest longer gaps that the rest of a chain needs from each place. */
function reachBackward(
	gaps: readonly ChainGap[],
	rules: ChainRules,
	{ track, forward }: { track: Track; forward: readonly Reached[] }
): Reached[] {
	const last = createReached(track).map((day) => day.map(() => 0));
	const backward = [last];
	for (let index = gaps.length - 1; index >= 0; index--) {
		const [gap, before, after] = [gaps[index], forward[index], backward[0]];
		const reached = createReached(track);
		if (!gap || !before || !after) return backward;
		const free = before.map((day) => day.map((pauses) => (pauses < NEVER ? 0 : NEVER)));
		forEachStep(free, { gap, rules, track, lostSlots: 0 }, (step) => {
			const day = reached[step.fromWeekday - 1];
			const rest = step.pauses + (after[step.weekday - 1]?.[step.slot] ?? NEVER);
			if (day) day[step.fromSlot] = Math.min(day[step.fromSlot] ?? NEVER, rest);
		});
		backward.unshift(reached);
	}
	return backward;
}

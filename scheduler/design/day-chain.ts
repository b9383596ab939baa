import { findBrokenChange } from './clock-change.ts';
import {
	createReached,
	forEachStep,
	listMoves,
	NEVER,
	SLOT_MINUTES,
	type ChainGap,
	type ChainRules,
	type Reached,
	type Track
} from './day-steps.ts';

export type { ChainGap, ChainRules } from './day-steps.ts';

export type ChainVerdict =
	| { readonly ok: true; readonly clockChangeAt: number | null }
	| { readonly ok: false; readonly gap: number; readonly reason: 'hours' | 'weekdays' };

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
	const alone = gaps.findIndex((gap) => !canStandAlone(gap, rules));
	let best = -1;
	const broken: (number | null)[] = [];
	for (const track of listTracks(rules)) {
		const forward = reachForward(gaps, rules, track);
		if (forward.length === gaps.length + 1) {
			broken.push(rules.countsElapsed ? findBrokenChange(gaps, rules, { track, forward }) : null);
		}
		best = Math.max(best, forward.length - 1);
	}
	if (alone >= 0 && (broken.length > 0 || alone <= best))
		return { ok: false, gap: alone, reason: 'hours' };
	if (broken.length > 0) {
		return { ok: true, clockChangeAt: broken.includes(null) ? null : (broken[0] ?? null) };
	}
	return { ok: false, gap: best, reason: 'weekdays' };
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

/** Whether a gap's own hours can be kept on some days: a longer gap is for a weekend, not for the rule. */
function canStandAlone(gap: ChainGap, { windowMinutes, toleranceMinutes }: ChainRules): boolean {
	const minutes = gap.isAnchor ? windowMinutes : Math.min(windowMinutes, 2 * toleranceMinutes);
	const spread = Math.floor(minutes / SLOT_MINUTES);
	const pauses = { count: 0, minHours: 0, maxHours: 0 };
	return listMoves(gap, { pauses }, { spread, lostSlots: 0 }).length > 0;
}

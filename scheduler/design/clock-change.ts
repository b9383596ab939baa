import {
	createReached,
	forEachStep,
	HOUR_SLOTS,
	NEVER,
	WEEK,
	type ChainGap,
	type ChainRules,
	type Reached,
	type Step,
	type Track
} from './day-steps.ts';

/** Clocks change in the night to a Sunday. */
const SUNDAY = 7;

/** The first gap that chains cross on an ordinary Sunday, but none on one at which clocks change. */
export function findBrokenChange(
	gaps: readonly ChainGap[],
	rules: ChainRules,
	{ track, forward }: { track: Track; forward: readonly Reached[] }
): number | null {
	const backward = reachBackward(gaps, rules, track);
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
function reachBackward(gaps: readonly ChainGap[], rules: ChainRules, track: Track): Reached[] {
	// From anywhere: a clock change leads to times that are not reached without one.
	const free = createReached(track).map((day) => day.map(() => 0));
	const backward = [free];
	for (let index = gaps.length - 1; index >= 0; index--) {
		const [gap, after] = [gaps[index], backward[0]];
		const reached = createReached(track);
		if (!gap || !after) return backward;
		forEachStep(free, { gap, rules, track, lostSlots: 0 }, (step) => {
			const day = reached[step.fromWeekday - 1];
			const rest = step.pauses + (after[step.weekday - 1]?.[step.slot] ?? NEVER);
			if (day) day[step.fromSlot] = Math.min(day[step.fromSlot] ?? NEVER, rest);
		});
		backward.unshift(reached);
	}
	return backward;
}

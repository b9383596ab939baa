/** One gap of a chain, with how far two starts may differ in clock time. */
export type ChainGap = {
	minHours: number;
	maxHours: number;
	nightsBetween: number;
	clockSpreadHours: number;
};

export type ChainRules = {
	/** ISO weekdays on which visits may be, 1 is Monday. */
	weekdays: readonly number[];
	pauses: { count: number; minHours: number; maxHours: number };
};

export type ChainVerdict =
	{ ok: true } | { ok: false; gapIndex: number; reason: 'hours' | 'weekdays' };

const hoursPerDay = 24;

/**
 * Whether any week lets a whole chain of visits keep its gaps, looking at days alone: no rigs, no
 * holidays. Says at which gap every chain breaks, and whether hours or weekdays are to blame.
 */
export function findDayChain(gaps: readonly ChainGap[], rules: ChainRules): ChainVerdict {
	let states = new Set(rules.weekdays.map((weekday) => stateOf(weekday, 0)));
	for (const [gapIndex, gap] of gaps.entries()) {
		const steps = listSteps(gap, rules);
		if (steps.length === 0) return { ok: false, gapIndex, reason: 'hours' };
		states = advance(states, steps, rules);
		if (states.size === 0) return { ok: false, gapIndex, reason: 'weekdays' };
	}
	return { ok: true };
}

type Step = { days: number; isPause: boolean };

/** Whole days by which the next visit may follow. */
function listSteps(gap: ChainGap, { pauses }: ChainRules): Step[] {
	const longest = Math.max(gap.maxHours, pauses.count > 0 ? pauses.maxHours : 0);
	const lastDay = Math.ceil((longest + gap.clockSpreadHours) / hoursPerDay);
	const steps: Step[] = [];
	for (let days = Math.max(0, gap.nightsBetween); days <= lastDay; days++) {
		if (fits(days, gap, gap)) steps.push({ days, isPause: false });
		else if (pauses.count > 0 && fits(days, pauses, gap)) steps.push({ days, isPause: true });
	}
	return steps;
}

function fits(
	days: number,
	range: { minHours: number; maxHours: number },
	{ clockSpreadHours }: ChainGap
): boolean {
	const hours = days * hoursPerDay;
	return hours + clockSpreadHours >= range.minHours && hours - clockSpreadHours <= range.maxHours;
}

const stateOf = (weekday: number, pausesUsed: number) => pausesUsed * 7 + (weekday - 1);

function advance(states: Set<number>, steps: Step[], { weekdays, pauses }: ChainRules) {
	const next = new Set<number>();
	for (const state of states) {
		for (const { days, isPause } of steps) {
			const weekday = (((state % 7) + days) % 7) + 1;
			const pausesUsed = Math.floor(state / 7) + (isPause ? 1 : 0);
			if (pausesUsed <= pauses.count && weekdays.includes(weekday)) {
				next.add(stateOf(weekday, pausesUsed));
			}
		}
	}
	return next;
}

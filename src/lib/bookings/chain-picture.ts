import type { ChainGap, ChainStop } from '$lib/charts/chain-band';
import { formatShortDay } from '$lib/time/format-instant';

type PlannedStop = {
	label: string;
	visit: { startMs: number; state: 'booked' | 'attended' | 'no-show' | 'cancelled' } | null;
};

const hourMs = 3_600_000;
const stopStates = {
	booked: 'booked',
	attended: 'done',
	'no-show': 'missed',
	cancelled: 'open'
} as const;

/**
 * A person's chain as ChainBand draws it: every visit that has a place, with the hours between.
 * Visits without one are left out, for no hours lead to them.
 */
export function summariseChain(
	plan: readonly PlannedStop[],
	zone: string
): { stops: ChainStop[]; gaps: ChainGap[] } {
	const placed = plan.flatMap(({ label, visit }) => (visit ? [{ label, ...visit }] : []));
	return {
		stops: placed.map(({ label, startMs, state }) => ({
			label,
			detail: formatShortDay(startMs, zone),
			state: stopStates[state]
		})),
		gaps: measureGaps(placed.map(({ startMs }) => startMs))
	};
}

/** Hours from each start to the next. */
export function measureGaps(startsMs: readonly number[]): ChainGap[] {
	return startsMs.slice(1).map((startMs, index) => {
		return { hours: (startMs - (startsMs[index] ?? startMs)) / hourMs };
	});
}

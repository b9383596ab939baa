import { measureGaps } from '$lib/bookings/chain-picture';
import type { ChainGap, ChainStop } from '$lib/charts/chain-band';
import type { ToldChain } from '$lib/server/bookings/tell-proposals';
import { formatShortDay } from '$lib/time/format-instant';

/** The value of a choice: the places to be booked, as the form sends them. */
export function toPlaces({ stops }: ToldChain): string {
	const open = stops.filter(({ isFixed }) => !isFixed);
	return JSON.stringify(
		open.map(({ visitNumber, startMs, rigId, staffId }) => {
			return { visitNumber, startMs, rigId, staffId };
		})
	);
}

/** A proposed chain as ChainBand draws it. */
export function toBand(
	{ stops }: ToldChain,
	zone: string
): { stops: ChainStop[]; gaps: ChainGap[] } {
	return {
		stops: stops.map(({ label, startMs, isFixed }) => ({
			label,
			detail: formatShortDay(startMs, zone),
			state: isFixed ? 'done' : 'proposed'
		})),
		gaps: measureGaps(stops.map(({ startMs }) => startMs))
	};
}

/** What a chain costs in comfort, in one line. */
export function describeCost(chain: ToldChain): string {
	const { pausesUsed, largestDriftMinutes, rigChangeCount } = chain;
	return [
		largestDriftMinutes === 0
			? 'always at the same time of day'
			: `starts within ${minutesText(largestDriftMinutes)} of the first`,
		rigChangeCount === 0 ? 'one rig' : countText(rigChangeCount, 'change of rig', 'changes of rig'),
		pausesUsed === 0 ? 'no longer pause' : countText(pausesUsed, 'longer pause', 'longer pauses')
	].join(', ');
}

function countText(count: number, one: string, many: string): string {
	return count === 1 ? `1 ${one}` : `${count} ${many}`;
}

function minutesText(minutes: number): string {
	const hours = Math.floor(minutes / 60);
	const rest = minutes % 60;
	if (hours === 0) return `${rest} min`;
	return rest === 0 ? `${hours} h` : `${hours} h ${rest} min`;
}

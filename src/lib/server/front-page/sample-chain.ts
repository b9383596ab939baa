import { findChains } from '$scheduler/booking/find-chains.ts';
import type {
	BookingProblem,
	GapRule,
	VisitPlan,
	Weekday,
	WeeklyWindow
} from '$scheduler/booking/types.ts';

const zone = 'Europe/Lisbon';
const weekdays: readonly Weekday[] = [1, 2, 3, 4, 5];
const hours: WeeklyWindow[] = weekdays.map((weekday) => ({
	weekday,
	fromMinute: 9 * 60,
	toMinute: 17 * 60
}));
/** Wednesday 17 March 2027, evening in Lisbon: the clocks go forward eleven days later. */
const askedAt = Date.UTC(2027, 2, 17, 18);
const dayMs = 24 * 3600 * 1000;

const nextDay: GapRule = {
	minHours: 20,
	targetHours: 24,
	maxHours: 28,
	nightsBetween: 1,
	allowedPauses: { count: 1, minHours: 68, maxHours: 100 }
};
const weekLater: GapRule = {
	minHours: 144,
	targetHours: 168,
	maxHours: 192,
	nightsBetween: 1,
	allowedPauses: { count: 0, minHours: 0, maxHours: 0 },
	// The same time of day a week later, also where the clocks change in between.
	hoursMean: 'clock'
};

export interface SampleChain {
	readonly zone: string;
	readonly starts: readonly number[];
	/** Hours between one start and the next, really elapsed. */
	readonly gapHours: readonly number[];
}

/**
 * The earliest chain of six practice days and a retention visit in an empty lab with two rigs, across a
 * weekend and a change of clocks, found by the planner itself.
 *
 * @throws {Error} when the planner finds none, which the unit test would show first
 */
export function findSampleChain(): SampleChain {
	const found = findChains({
		problem: describeProblem(),
		horizonEndMs: askedAt + 42 * dayMs,
		chainCount: 1
	});
	const chain = found.ok ? found.chains[0] : undefined;
	if (!chain) throw new Error('the front page’s chain cannot be booked');
	const starts = chain.visits.map(({ startMs }) => startMs);
	return {
		zone,
		starts,
		gapHours: starts.slice(1).map((start, index) => (start - (starts[index] ?? start)) / 3_600_000)
	};
}

function describeProblem(): BookingProblem {
	const rig = (id: string) => ({ id, roomId: null, hours, busy: [] });
	return {
		plan: {
			visits: [1, 2, 3, 4, 5, 6, 7].map(planVisit),
			clockWindow: { earliestMinute: 570, latestMinute: 960, sameTimeToleranceMinutes: 120 },
			weekdays
		},
		calendar: {
			zone,
			holidays: ['2027-03-26'],
			rigs: [rig('gull'), rig('heron')],
			rooms: [],
			staff: [{ id: 'staff', hours, busy: [] }]
		},
		participant: { zone: 'Asia/Tokyo', availability: null, busy: [], earliestStartMs: null },
		nowMs: askedAt
	};
}

function planVisit(number: number): VisitPlan {
	const isRetention = number === 7;
	return {
		number,
		label: isRetention ? 'Retention' : `Day ${number}`,
		kind: isRetention ? 'retention' : 'practice',
		minutes: 45,
		setupMinutes: 15,
		cleanupMinutes: 15,
		gapBefore: number === 1 ? null : isRetention ? weekLater : nextDay
	};
}

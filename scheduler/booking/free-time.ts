import { mergeIntervals, subtractIntervals } from './intervals.ts';
import { DAY_MS, toDayNumber } from './local-date.ts';
import type { BookingProblem, Interval, RigCalendar } from './types.ts';
import { expandWeeklyHours } from './weekly-hours.ts';
import { getZoneClock, type ZoneClock } from './zone-clock.ts';

/** Opening hours and what is left of them, as merged intervals. */
type Resource = { id: string; open: Interval[]; free: Interval[] };

/** A problem with its weekly hours laid out over a stretch of real time. */
export type FreeTime = {
	problem: BookingProblem;
	/** Starts are looked for in here. */
	horizon: Interval;
	labClock: ZoneClock;
	holidays: ReadonlySet<number>;
	/** `freeOfOthers` heeds the busy times of the rig, `free` those of its room too. */
	rigs: (Resource & { freeOfOthers: Interval[] })[];
	staff: Resource[];
	person: { available: Interval[] | null; busy: Interval[] };
};

/**
 * Lays out everybody's hours over a stretch of time, ready for looking up many starts.
 * @throws RangeError when a zone is unknown or a holiday is no date
 */
export function layOutFreeTime(problem: BookingProblem, horizon: Interval): FreeTime {
	const { calendar, participant } = problem;
	// A visit that starts inside the horizon may end, or be set up, outside it.
	const range = { fromMs: horizon.fromMs - 2 * DAY_MS, toMs: horizon.toMs + 2 * DAY_MS };
	const { availability, zone } = participant;
	return {
		problem,
		horizon,
		labClock: getZoneClock(calendar.zone),
		holidays: new Set(calendar.holidays.map(toDayNumber)),
		rigs: calendar.rigs.map((rig) => layOutRig(problem, rig, range)),
		staff: calendar.staff.map(({ id, hours, busy }) => {
			const open = expandWeeklyHours(hours, calendar.zone, range);
			return { id, open, free: subtractIntervals(open, busy) };
		}),
		person: {
			available: availability ? expandWeeklyHours(availability, zone, range) : null,
			busy: mergeIntervals(participant.busy)
		}
	};
}

function layOutRig({ calendar }: BookingProblem, rig: RigCalendar, range: Interval) {
	const open = expandWeeklyHours(rig.hours, calendar.zone, range);
	const freeOfOthers = subtractIntervals(open, rig.busy);
	const room = calendar.rooms.find(({ id }) => id === rig.roomId);
	const free = subtractIntervals(freeOfOthers, room?.busy ?? []);
	return { id: rig.id, open, freeOfOthers, free };
}

import { mergeIntervals } from './intervals.ts';
import { DAY_MS, MINUTE_MS, toWeekday } from './local-date.ts';
import type { Interval, WeeklyWindow } from './types.ts';
import { getZoneClock, type LocalTime } from './zone-clock.ts';

/**
 * Whether every minute of a stretch of time reads inside one of the weekly windows on the local
 * clock. Windows that touch join, so a stretch may run over midnight.
 *
 * Method: minute by minute, on purpose: it is the check of {@link expandWeeklyHours}.
 */
export function liesInsideHours(
	{ fromMs, toMs }: Interval,
	hours: readonly WeeklyWindow[],
	zone: string
): boolean {
	const clock = getZoneClock(zone);
	for (let ms = fromMs; ms < toMs; ms += MINUTE_MS) {
		if (!isOpen(hours, clock.read(ms))) return false;
	}
	return true;
}

function isOpen(hours: readonly WeeklyWindow[], { dayNumber, minute }: LocalTime): boolean {
	const today = toWeekday(dayNumber);
	return hours.some(
		({ weekday, fromMinute, toMinute }) =>
			weekday === today && minute >= fromMinute && minute < toMinute
	);
}

/**
 * Weekly windows as intervals of real time over a range, merged and in order. A window over a change
 * of clocks lasts as long as the clock shows it: an hour less in spring, an hour more in autumn.
 *
 * Shapes: windows and a range in, disjoint ascending intervals out. Units: epoch milliseconds.
 * Method: per local day and per stretch of constant offset, cut to the range.
 * Source: method sheet "Booking" 9. Accuracy: exact; scheduler/booking/weekly-hours.test.ts.
 * @throws RangeError when the zone is unknown
 */
export function expandWeeklyHours(
	hours: readonly WeeklyWindow[],
	zone: string,
	{ fromMs, toMs }: Interval
): Interval[] {
	const segments = getZoneClock(zone).listSegments(fromMs, toMs);
	const pieces = segments.flatMap(({ offsetMs, ...segment }) => {
		const firstDay = Math.floor((segment.fromMs + offsetMs) / DAY_MS);
		const lastDay = Math.floor((segment.toMs - 1 + offsetMs) / DAY_MS);
		return listWindows(hours, firstDay, lastDay).map((window) => ({
			fromMs: Math.max(segment.fromMs, window.fromMs - offsetMs),
			toMs: Math.min(segment.toMs, window.toMs - offsetMs)
		}));
	});
	return mergeIntervals(pieces);
}

/** Windows of a run of local days, on the local clock taken as if it were UTC. */
function listWindows(
	hours: readonly WeeklyWindow[],
	firstDay: number,
	lastDay: number
): Interval[] {
	const dayCount = lastDay - firstDay + 1;
	const days = Array.from({ length: dayCount }, (_, index) => firstDay + index);
	return days.flatMap((day) =>
		hours
			.filter(({ weekday }) => weekday === toWeekday(day))
			.map(({ fromMinute, toMinute }) => ({
				fromMs: day * DAY_MS + fromMinute * MINUTE_MS,
				toMs: day * DAY_MS + toMinute * MINUTE_MS
			}))
	);
}

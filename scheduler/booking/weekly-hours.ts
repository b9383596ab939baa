import { mergeIntervals } from './intervals.ts';
import { DAY_MS, MINUTE_MS, toWeekday } from './local-date.ts';
import type { Interval, WeeklyWindow } from './types.ts';
import { getZoneClock, type LocalTime } from './zone-clock.ts';

/**
 * Whether every minute of a stretch of time reads inside one of the weekly windows on the local
 * clock. Windows that touch join, so a stretch may run over midnight.
 *
 * Method: reading by reading, on purpose: it is the check of {@link expandWeeklyHours}. Between two
 * common divisors of all times involved nothing can change, so that far it may step.
 */
export function liesInsideHours(
	{ fromMs, toMs }: Interval,
	hours: readonly WeeklyWindow[],
	zone: string
): boolean {
	const clock = getZoneClock(zone);
	const edges = hours.flatMap(({ fromMinute, toMinute }) => [fromMinute, toMinute]);
	const times = [fromMs / MINUTE_MS, toMs / MINUTE_MS, OFFSET_GRID_MINUTES, ...edges];
	const stepMs = times.reduce(greatestCommonDivisor) * MINUTE_MS;
	for (let ms = fromMs; ms < toMs; ms += stepMs) {
		if (!isOpen(hours, clock.read(ms))) return false;
	}
	return true;
}

/** Clocks change, and zones differ, by whole quarter hours. */
const OFFSET_GRID_MINUTES = 15;

function greatestCommonDivisor(a: number, b: number): number {
	if (!Number.isInteger(a) || !Number.isInteger(b)) return 1;
	return b === 0 ? a : greatestCommonDivisor(b, a % b);
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

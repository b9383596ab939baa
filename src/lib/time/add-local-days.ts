import { parseDate } from '@internationalized/date';
import { localToInstants } from './local-to-instants';
import { wallClock } from './wall-clock';

/**
 * The same clock time a number of local days later (or earlier, when negative).
 *
 * Not a multiple of 24 hours: over a change of clocks a local day has 23 or 25. Like
 * `localToInstants` it answers none in a gap and two in an overlap, and never chooses.
 *
 * @throws RangeError when `days` is no whole number or the zone is unknown.
 * @example addLocalDays(Date.UTC(2027, 2, 27, 8), 1, 'Europe/Berlin') // [Date.UTC(2027, 2, 28, 7)]
 */
export function addLocalDays(instantMs: number, days: number, zone: string): number[] {
	const [date = '', time = ''] = wallClock(instantMs, zone).split('T');
	const subSecondMs = ((instantMs % 1000) + 1000) % 1000;
	const instants = localToInstants(`${addDaysToDate(date, days)}T${time}`, zone);
	return instants.map((ms) => ms + subSecondMs);
}

/** A calendar date moved by whole days: ('2027-02-28', 1) is '2027-03-01'. */
export function addDaysToDate(date: string, days: number): string {
	if (!Number.isInteger(days)) throw new RangeError(`Not a whole number of days: ${days}`);
	return parseDate(date).add({ days }).toString();
}

import { addDaysToDate } from './add-local-days';
import { localToInstants } from './local-to-instants';
import { localDateOf } from './wall-clock';

const SEARCH_MS = 15 * 3_600_000;

/**
 * The first instant of the local day that contains an instant.
 *
 * Usually midnight. Where clocks jump over midnight the day begins later (01:00), where midnight
 * is shown twice it begins at the first.
 * @throws RangeError when the zone is unknown.
 * @example startOfLocalDay(Date.UTC(2027, 2, 28, 9), 'Europe/Berlin') // Date.UTC(2027, 2, 27, 23)
 */
export function startOfLocalDay(instantMs: number, zone: string): number {
	return startOfLocalDate(localDateOf(instantMs, zone), zone);
}

/** The first instant of the local day after the one that contains an instant. */
export function startOfNextLocalDay(instantMs: number, zone: string): number {
	return startOfLocalDate(addDaysToDate(localDateOf(instantMs, zone), 1), zone);
}

/** The first instant at which the calendar of a zone shows a date ('YYYY-MM-DD') or a later one. */
export function startOfLocalDate(date: string, zone: string): number {
	const [midnight] = localToInstants(`${date}T00:00`, zone);
	return midnight ?? firstInstantOnOrAfter(date, zone);
}

function firstInstantOnOrAfter(date: string, zone: string): number {
	const asUtcMs = Date.parse(`${date}T00:00Z`);
	let beforeMs = asUtcMs - SEARCH_MS;
	let afterMs = asUtcMs + SEARCH_MS + 24 * 3_600_000;
	while (afterMs - beforeMs > 1) {
		const middleMs = Math.floor((beforeMs + afterMs) / 2);
		if (localDateOf(middleMs, zone) >= date) afterMs = middleMs;
		else beforeMs = middleMs;
	}
	return afterMs;
}

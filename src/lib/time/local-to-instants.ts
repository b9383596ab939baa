import { utcOffsetMs, wallClock } from './wall-clock';

const HOUR_MS = 3_600_000;
const LOCAL_PATTERN = /^(\d{4})-(\d{2})-(\d{2})T(\d{2}):(\d{2})(?::(\d{2}))?$/;

/**
 * Every instant at which the clock of a zone shows the given local time, earliest first.
 *
 * None when clocks jump over that time, two when they go back and show it twice. It never chooses:
 * the caller asks a person, or refuses with the reason.
 *
 * Units: epoch milliseconds. Method: an instant t showing the local time n obeys
 * t = n - offset(t); every offset in force within 15 hours of n is tried and checked.
 * Source: method sheet on calendars, cases T1 to T7 (checked in the test beside).
 * @throws RangeError when `local` is no local date and time, or the zone is unknown.
 * @example localToInstants('2027-10-31T02:30', 'Europe/Berlin').length // 2
 */
export function localToInstants(local: string, zone: string): number[] {
	const wanted = withSeconds(local);
	const asUtcMs = Date.parse(`${wanted}Z`);
	const offsets = new Set<number>();
	for (let hours = -15; hours <= 15; hours++) {
		offsets.add(utcOffsetMs(asUtcMs + hours * HOUR_MS, zone));
	}
	return [...offsets]
		.map((offsetMs) => asUtcMs - offsetMs)
		.filter((instantMs) => wallClock(instantMs, zone) === wanted)
		.sort((a, b) => a - b);
}

export type LocalTimeAnswer =
	| { ok: true; instantMs: number }
	| { ok: false; reason: 'clock-gap' }
	| { ok: false; reason: 'clock-overlap'; instantsMs: [number, number] };

/** The one instant of a local time, or the reason why there is not exactly one. */
export function oneInstant(local: string, zone: string): LocalTimeAnswer {
	const [first, second] = localToInstants(local, zone);
	if (first === undefined) return { ok: false, reason: 'clock-gap' };
	if (second === undefined) return { ok: true, instantMs: first };
	return { ok: false, reason: 'clock-overlap', instantsMs: [first, second] };
}

/** Whether the wall clock that an instant shows is shown at another instant too. */
export function isInClockOverlap(instantMs: number, zone: string): boolean {
	return localToInstants(wallClock(instantMs, zone), zone).length > 1;
}

function withSeconds(local: string): string {
	if (!LOCAL_PATTERN.test(local)) {
		throw new RangeError(`Not a local date and time like 2027-03-28T09:00: "${local}"`);
	}
	const wanted = local.length === 16 ? `${local}:00` : local;
	const readBackMs = Date.parse(`${wanted}Z`);
	const exists = !Number.isNaN(readBackMs) && new Date(readBackMs).toISOString().startsWith(wanted);
	if (!exists) throw new RangeError(`The calendar has no such date or time: "${local}"`);
	return wanted;
}

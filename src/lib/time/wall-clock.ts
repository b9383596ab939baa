/**
 * What a clock on the wall of a place shows at an instant.
 *
 * Units: `instantMs` is milliseconds since 1970-01-01T00:00Z.
 * Method: the runtime's own zone data through `Intl.DateTimeFormat`.
 * @throws RangeError when the zone is unknown or the instant is not a finite number.
 * @example wallClock(Date.UTC(2027, 2, 28, 7), 'Europe/Berlin') // '2027-03-28T09:00:00'
 */
export function wallClock(instantMs: number, zone: string): string {
	const part = wallClockParts(instantMs, zone);
	const year = String(part.year).padStart(4, '0');
	return `${year}-${two(part.month)}-${two(part.day)}T${two(part.hour)}:${two(part.minute)}:${two(part.second)}`;
}

/** The local calendar date, 'YYYY-MM-DD', of an instant. */
export function localDateOf(instantMs: number, zone: string): string {
	return wallClock(instantMs, zone).slice(0, 10);
}

/** Local time minus UTC, in whole minutes: +60 for Berlin in winter, -240 for New York in summer. */
export function utcOffsetMinutes(instantMs: number, zone: string): number {
	return Math.round(utcOffsetMs(instantMs, zone) / 60_000);
}

/** Local time minus UTC, in milliseconds. Old local mean times have offsets with seconds. */
export function utcOffsetMs(instantMs: number, zone: string): number {
	const wholeSecondMs = Math.floor(instantMs / 1000) * 1000;
	const part = wallClockParts(wholeSecondMs, zone);
	const asUtcMs = Date.UTC(
		part.year,
		part.month - 1,
		part.day,
		part.hour,
		part.minute,
		part.second
	);
	return asUtcMs - wholeSecondMs;
}

interface WallClockParts {
	year: number;
	month: number;
	day: number;
	hour: number;
	minute: number;
	second: number;
}

const formatters = new Map<string, Intl.DateTimeFormat>();

function wallClockParts(instantMs: number, zone: string): WallClockParts {
	if (!Number.isFinite(instantMs)) throw new RangeError(`Not an instant: ${instantMs}`);
	const part: WallClockParts = { year: 0, month: 0, day: 0, hour: 0, minute: 0, second: 0 };
	for (const { type, value } of formatterOf(zone).formatToParts(instantMs)) {
		if (type in part) part[type as keyof WallClockParts] = Number(value);
	}
	return part;
}

function formatterOf(zone: string): Intl.DateTimeFormat {
	const known = formatters.get(zone);
	if (known) return known;
	const made = new Intl.DateTimeFormat('en-US-u-ca-iso8601-nu-latn', {
		timeZone: zone,
		hourCycle: 'h23',
		year: 'numeric',
		month: '2-digit',
		day: '2-digit',
		hour: '2-digit',
		minute: '2-digit',
		second: '2-digit'
	});
	formatters.set(zone, made);
	return made;
}

function two(value: number): string {
	return String(value).padStart(2, '0');
}

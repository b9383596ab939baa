import { countDays, DAY_MS, MINUTE_MS } from './local-date.ts';

/** A point on a zone's clock: days since 1970-01-01 of the local calendar, minutes since midnight. */
export type LocalTime = { dayNumber: number; minute: number };

/** The clock of one IANA zone, on the minute. */
export type ZoneClock = {
	zone: string;
	/** Local time at an instant. */
	read(instantMs: number): LocalTime;
	/** Instants that show this local time: none in a gap of the clocks, two in an overlap. */
	findInstants(local: LocalTime): number[];
	/** What the clock shows minus UTC, at an instant. */
	offsetMs(instantMs: number): number;
	/** Stretches of constant offset that together cover [fromMs, toMs). */
	listSegments(fromMs: number, toMs: number): ZoneSegment[];
};

export type ZoneSegment = { fromMs: number; toMs: number; offsetMs: number };

const clocks = new Map<string, ZoneClock>();

/**
 * The clock of a zone, read from the runtime's zone data and remembered.
 *
 * Method: the offset is read once per UTC day; where two days differ the change is found by
 * bisection to the minute. Two changes within one UTC day that cancel out are not seen; the zone
 * data hold none.
 * Accuracy: exact from 1970 on, for offsets of whole minutes; scheduler/booking/zone-clock.test.ts.
 * @throws RangeError when the zone is unknown
 * @example // Berlin, 28 March 2027, 02:30 does not exist
 * const berlin = getZoneClock('Europe/Berlin');
 * berlin.findInstants({ dayNumber: toDayNumber('2027-03-28'), minute: 150 }) // []
 */
export function getZoneClock(zone: string): ZoneClock {
	const known = clocks.get(zone);
	if (known) return known;
	const made = createZoneClock(zone);
	clocks.set(zone, made);
	return made;
}

function createZoneClock(zone: string): ZoneClock {
	const readOffset = createOffsetReader(zone);
	const days = new Map<number, readonly ZoneSegment[]>();
	let recent: ZoneSegment = { fromMs: 0, toMs: 0, offsetMs: 0 };

	function segmentsOfDay(day: number): readonly ZoneSegment[] {
		let segments = days.get(day);
		if (!segments) {
			segments = splitDay(day, readOffset);
			days.set(day, segments);
		}
		return segments;
	}
	function offsetMs(instantMs: number): number {
		// Readings come in runs: most fall into the stretch of the one before.
		if (instantMs >= recent.fromMs && instantMs < recent.toMs) return recent.offsetMs;
		const segments = segmentsOfDay(Math.floor(instantMs / DAY_MS));
		const found = segments.find((segment) => instantMs < segment.toMs);
		if (!found) throw new Error(`no offset of ${zone} at ${instantMs}`);
		recent = found;
		return found.offsetMs;
	}
	function read(instantMs: number): LocalTime {
		const localMs = instantMs + offsetMs(instantMs);
		const dayNumber = Math.floor(localMs / DAY_MS);
		return { dayNumber, minute: Math.floor((localMs - dayNumber * DAY_MS) / MINUTE_MS) };
	}
	function listSegments(fromMs: number, toMs: number): ZoneSegment[] {
		const result: ZoneSegment[] = [];
		for (let day = Math.floor(fromMs / DAY_MS); day * DAY_MS < toMs; day += 1) {
			for (const segment of segmentsOfDay(day)) appendSegment(result, segment, fromMs, toMs);
		}
		return result;
	}
	function findInstants({ dayNumber, minute }: LocalTime): number[] {
		const localMs = dayNumber * DAY_MS + minute * MINUTE_MS;
		const offsets = new Set(
			listSegments(localMs - DAY_MS, localMs + DAY_MS).map((segment) => segment.offsetMs)
		);
		const candidates = [...offsets].map((offset) => localMs - offset);
		return candidates.filter((ms) => ms + offsetMs(ms) === localMs).sort((a, b) => a - b);
	}
	return { zone, read, findInstants, offsetMs, listSegments };
}

/** Adds the part of a segment inside the range, joined to the one before when nothing changes. */
function appendSegment(result: ZoneSegment[], segment: ZoneSegment, fromMs: number, toMs: number) {
	const from = Math.max(segment.fromMs, fromMs);
	const to = Math.min(segment.toMs, toMs);
	if (from >= to) return;
	const last = result.at(-1);
	if (last && last.offsetMs === segment.offsetMs) last.toMs = to;
	else result.push({ fromMs: from, toMs: to, offsetMs: segment.offsetMs });
}

function splitDay(day: number, readOffset: (ms: number) => number): ZoneSegment[] {
	const fromMs = day * DAY_MS;
	const toMs = fromMs + DAY_MS;
	const before = readOffset(fromMs);
	const after = readOffset(toMs);
	if (before === after) return [{ fromMs, toMs, offsetMs: before }];
	let low = fromMs;
	let high = toMs;
	while (high - low > MINUTE_MS) {
		const middle = Math.floor((low + high) / 2 / MINUTE_MS) * MINUTE_MS;
		if (readOffset(middle) === before) low = middle;
		else high = middle;
	}
	const first = { fromMs, toMs: high, offsetMs: before };
	return high === toMs ? [first] : [first, { fromMs: high, toMs, offsetMs: after }];
}

function createOffsetReader(zone: string): (instantMs: number) => number {
	const format = new Intl.DateTimeFormat('en-US', {
		timeZone: zone,
		calendar: 'gregory',
		hourCycle: 'h23',
		year: 'numeric',
		month: 'numeric',
		day: 'numeric',
		hour: 'numeric',
		minute: 'numeric',
		second: 'numeric'
	});
	return (instantMs) => {
		const parts = new Map(format.formatToParts(instantMs).map((p) => [p.type, Number(p.value)]));
		const read = (type: Intl.DateTimeFormatPartTypes) => parts.get(type) ?? 0;
		const days = countDays(read('year'), read('month'), read('day'));
		const seconds = (read('hour') * 60 + read('minute')) * 60 + read('second');
		return days * DAY_MS + seconds * 1000 - Math.floor(instantMs / 1000) * 1000;
	};
}

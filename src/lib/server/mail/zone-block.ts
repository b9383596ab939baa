import ICAL from 'ical.js';
import { tzlib_get_ical_block } from 'timezones-ical-library';
import { isInClockOverlap } from '$lib/time/local-to-instants';
import { utcOffsetMs, wallClock } from '$lib/time/wall-clock';

/**
 * The VTIMEZONE that gives exactly these instants, or undefined when times must go out in UTC.
 *
 * UTC is needed where the zone has no block, where a time falls in an hour that clocks show twice
 * (programs disagree which one is meant), and where the block and this runtime's zone data differ.
 */
export function zoneBlockFor(zone: string, instantsMs: number[]): ICAL.Component | undefined {
	const [text] = tzlib_get_ical_block(zone);
	if (!text?.startsWith('BEGIN:VTIMEZONE')) return undefined;
	const block = new ICAL.Component(ICAL.parse(text));
	if (block.getFirstPropertyValue('tzid') !== zone) return undefined;
	const timezone = new ICAL.Timezone(block);
	const isSure = instantsMs.every(
		(ms) => !isInClockOverlap(ms, zone) && offsetOf(timezone, ms, zone) === utcOffsetMs(ms, zone)
	);
	return isSure ? block : undefined;
}

function offsetOf(timezone: ICAL.Timezone, instantMs: number, zone: string): number {
	const local = ICAL.Time.fromDateTimeString(wallClock(instantMs, zone));
	return timezone.utcOffset(local) * 1000;
}

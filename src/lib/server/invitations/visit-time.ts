import { formatRange, formatShortDay, formatTime, formatWithZone } from '$lib/time/format-instant';
import { zoneCity, zoneLabel } from '$lib/time/zone-label';
import { utcOffsetMinutes } from '$lib/time/wall-clock';
import type { InvitationWords } from './words';

export interface VisitTime {
	startMs: number;
	endMs: number;
}

/**
 * 'Thu 11 March 2027, 10:30 to 11:45 Lisbon (UTC+0)'. When clocks change during the visit, each end
 * has its own offset: '01:30 Berlin (UTC+1) – 04:00 Berlin (UTC+2)'.
 */
export function visitTimeText(time: VisitTime, zone: string, language: string): string {
	const { startMs, endMs } = time;
	if (utcOffsetMinutes(startMs, zone) === utcOffsetMinutes(endMs, zone)) {
		return `${formatRange(startMs, endMs, zone, language)} ${zoneLabel(startMs, zone)}`;
	}
	const end = `${formatTime(endMs, zone)} ${zoneLabel(endMs, zone)}`;
	return `${formatWithZone(startMs, zone, language)} – ${end}`;
}

/** 'Mon 29 Mar, 14:00 (Berlin time)', for a subject line. */
export function subjectTime(startMs: number, zone: string, words: InvitationWords): string {
	const day = formatShortDay(startMs, zone, words.language);
	const zoneName = zone === 'UTC' ? 'UTC' : words.zoneTime(zoneCity(zone));
	return `${day}, ${formatTime(startMs, zone)} (${zoneName})`;
}

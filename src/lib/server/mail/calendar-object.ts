import { createEvents, type DateArray, type EventAttributes } from 'ics';
import ICAL from 'ical.js';
import { wallClock } from '$lib/time/wall-clock';
import { checkedAddress, cleanLine, cleanName, cleanText } from './clean-text';
import { zoneBlockFor } from './zone-block';

// ical.js counts without the space that begins a folded line: 74 gives lines of at most 75 octets.
ICAL.foldLength = 74;

export const PRODUCT_ID = '-//Ovalry//Visits 1.0//EN';

export type AnswerState = 'NEEDS-ACTION' | 'ACCEPTED' | 'DECLINED' | 'TENTATIVE';

/** One visit as a calendar program gets it: one event, one person invited. */
export interface CalendarVisit {
	method: 'REQUEST' | 'CANCEL';
	/** Stable for the booking's life and never used again. */
	uid: string;
	/** Starts at 0 and never falls; the caller raises it as RFC 5546, 2.1.4 says. */
	sequence: number;
	/** When this object is made; newer for every message about one visit. */
	stampMs: number;
	startMs: number;
	endMs: number;
	/** The laboratory's zone. */
	zone: string;
	/** The public title only. */
	summary: string;
	location: string;
	description: string;
	/** Page of this visit. */
	url?: string;
	organizer: { name: string; email: string };
	attendee: { name: string; email: string; answer: AnswerState };
	/** Minutes before the start at which the calendar may remind; a courtesy only. */
	reminderMinutes?: number[];
}

/**
 * The text of an iCalendar object that invites to, moves or cancels one visit.
 *
 * Method: `ics` writes the event from cleaned text, ical.js reads it, adds the zone and writes it
 * again with legal quoting and folding. Times carry the laboratory's zone with its rules; in an
 * hour that clocks show twice, or where zone data disagree, they are written in UTC.
 * Source: RFC 5545, 5546, 6047; method sheet on calendars and mail, checklists A and B.
 * @throws RangeError, TypeError when a field cannot be right.
 */
export function buildCalendarObject(visit: CalendarVisit): string {
	checkVisit(visit);
	const { error, value } = createEvents([eventOf(visit)], {
		productId: PRODUCT_ID,
		method: visit.method
	});
	if (error || !value) throw error ?? new Error('The calendar library returned nothing');
	return finished(new ICAL.Component(ICAL.parse(value)), visit);
}

function eventOf(visit: CalendarVisit): EventAttributes {
	const isCancel = visit.method === 'CANCEL';
	return {
		uid: visit.uid,
		sequence: visit.sequence,
		// `ics` reads this as DTSTAMP; its types do not list it
		...{ timestamp: visit.stampMs },
		start: utcParts(visit.startMs),
		end: utcParts(visit.endMs),
		startInputType: 'utc',
		startOutputType: 'utc',
		endInputType: 'utc',
		endOutputType: 'utc',
		title: cleanLine(visit.summary),
		location: cleanText(visit.location),
		description: cleanText(visit.description),
		status: isCancel ? 'CANCELLED' : 'CONFIRMED',
		transp: isCancel ? 'TRANSPARENT' : 'OPAQUE',
		busyStatus: isCancel ? 'FREE' : 'BUSY',
		classification: 'PRIVATE',
		organizer: { name: cleanName(visit.organizer.name), email: visit.organizer.email },
		attendees: [
			{
				name: cleanName(visit.attendee.name),
				email: visit.attendee.email,
				rsvp: !isCancel,
				partstat: visit.attendee.answer,
				role: 'REQ-PARTICIPANT',
				cutype: 'INDIVIDUAL'
			}
		],
		alarms: isCancel ? [] : alarmsOf(visit)
	};
}

function alarmsOf(visit: CalendarVisit): NonNullable<EventAttributes['alarms']> {
	return (visit.reminderMinutes ?? []).map((minutes) => ({
		action: 'display',
		description: cleanLine(visit.summary),
		trigger: { minutes, before: true }
	}));
}

function finished(calendar: ICAL.Component, visit: CalendarVisit): string {
	const event = calendar.getFirstSubcomponent('vevent');
	if (!event) throw new Error('The calendar library wrote no event');
	calendar.removeProperty('x-published-ttl');
	lowerCaseMailto(event);
	addText(event, 'x-microsoft-disallow-counter', 'TRUE');
	if (visit.url) addUrl(event, visit.url);
	const block = zoneBlockFor(visit.zone, [visit.startMs, visit.endMs]);
	if (block) {
		setLocal(event, 'dtstart', visit.startMs, visit.zone);
		setLocal(event, 'dtend', visit.endMs, visit.zone);
		calendar.jCal[2].unshift(block.jCal);
	}
	const text = new ICAL.Component(calendar.jCal).toString();
	return text.endsWith('\r\n') ? text : `${text}\r\n`;
}

function setLocal(event: ICAL.Component, name: string, instantMs: number, zone: string): void {
	const property = new ICAL.Property(name);
	property.setParameter('tzid', zone);
	property.setValue(ICAL.Time.fromDateTimeString(wallClock(instantMs, zone)));
	event.removeProperty(name);
	event.addProperty(property);
}

function addText(event: ICAL.Component, name: string, value: string): void {
	const property = new ICAL.Property(name);
	property.setValue(value);
	event.addProperty(property);
}

function addUrl(event: ICAL.Component, url: string): void {
	const property = new ICAL.Property('url');
	property.setValue(new URL(url).href);
	event.addProperty(property);
}

function lowerCaseMailto(event: ICAL.Component): void {
	for (const name of ['attendee', 'organizer']) {
		for (const property of event.getAllProperties(name)) {
			property.setValue(String(property.getFirstValue()).replace(/^mailto:/i, 'mailto:'));
		}
	}
}

function checkVisit(visit: CalendarVisit): void {
	if (!Number.isInteger(visit.sequence) || visit.sequence < 0) {
		throw new RangeError(`SEQUENCE is a whole number from 0, not ${visit.sequence}`);
	}
	if (!(visit.endMs > visit.startMs)) throw new RangeError('A visit ends after it starts');
	if (!/^[0-9a-z-]{8,}@[0-9a-z.-]+$/.test(visit.uid)) throw new RangeError('Not a UID of a visit');
	for (const minutes of visit.reminderMinutes ?? []) {
		if (!Number.isInteger(minutes) || minutes < 1) {
			throw new RangeError('A reminder comes a whole number of minutes before, at least 1');
		}
	}
	checkedAddress(visit.organizer.email);
	checkedAddress(visit.attendee.email);
}

function utcParts(instantMs: number): DateArray {
	const at = new Date(instantMs);
	return [
		at.getUTCFullYear(),
		at.getUTCMonth() + 1,
		at.getUTCDate(),
		at.getUTCHours(),
		at.getUTCMinutes()
	];
}

import ICAL from 'ical.js';
import { expect } from 'vitest';
import type { CalendarVisit } from '$lib/server/mail/calendar-object';

export const MINUTE_MS = 60_000;
export const at = (iso: string) => Date.parse(iso);
export const uid = '0c5d6a1e-4f3b-4d53-9c0a-6f2f0f3c9a01@ovalry.example';

export function visit(change: Partial<CalendarVisit> = {}): CalendarVisit {
	const startMs = change.startMs ?? at('2027-03-11T10:30Z');
	return {
		method: 'REQUEST',
		uid,
		sequence: 0,
		stampMs: at('2027-03-01T12:00:07Z'),
		endMs: startMs + 75 * MINUTE_MS,
		zone: 'Europe/Lisbon',
		summary: 'Practising a sliding movement',
		location: 'Room 2.14, Quay House',
		description: 'Please bring flat shoes.\nCall +351 000 000 if you are late.',
		organizer: { name: 'Tidewater Movement Lab', email: 'lab@ovalry.example' },
		attendee: { name: 'Anna Beck', email: 'anna@people.example', answer: 'NEEDS-ACTION' },
		reminderMinutes: [1440],
		...change,
		startMs
	};
}

export const parse = (text: string) => new ICAL.Component(ICAL.parse(text));
export function eventOf(text: string): ICAL.Component {
	const events = parse(text).getAllSubcomponents('vevent');
	expect(events).toHaveLength(1);
	return events[0] ?? new ICAL.Component('vevent');
}
export const value = (event: ICAL.Component, name: string) =>
	String(event.getFirstPropertyValue(name));
export const propertyNames = (text: string) =>
	[parse(text), ...parse(text).getAllSubcomponents()]
		.flatMap((component) => component.getAllProperties())
		.map((property) => property.name);
export function instantOf(text: string, name: string): number {
	const component = parse(text);
	const zone = component.getFirstSubcomponent('vtimezone');
	if (zone) ICAL.TimezoneService.register(new ICAL.Timezone(zone), undefined);
	const time = eventOf(text).getFirstPropertyValue(name);
	if (!(time instanceof ICAL.Time)) throw new Error(`${name} is no time`);
	return time.toUnixTime() * 1000;
}

import { describe, expect, it } from 'vitest';
import { buildCalendarObject } from './calendar-object';
import {
	MINUTE_MS,
	at,
	eventOf,
	instantOf,
	value,
	visit
} from '../../../../tests/support/calendar-visit';

describe('calendar object: times (checklist A 8 to 11, 60, 61)', () => {
	it('carries the laboratory’s zone with its yearly rules, once', () => {
		const text = buildCalendarObject(visit());
		expect(text).toContain('DTSTART;TZID=Europe/Lisbon:20270311T103000\r\n');
		expect(text).toContain('DTEND;TZID=Europe/Lisbon:20270311T114500\r\n');
		expect(text.match(/BEGIN:VTIMEZONE/g)).toHaveLength(1);
		expect(text).toContain('RRULE:FREQ=YEARLY');
		expect(text).not.toContain('RDATE');
		expect(eventOf(text).getFirstProperty('duration')).toBeNull();
		expect(text).not.toContain('VALUE=DATE');
	});

	it.each([
		'Europe/Berlin',
		'Europe/Dublin',
		'America/New_York',
		'Australia/Sydney',
		'Asia/Kolkata'
	])('gives back the same instants in %s, winter and summer', (zone) => {
		for (const iso of ['2027-01-15T08:30Z', '2027-07-15T08:30Z', '2027-03-28T07:00Z']) {
			const text = buildCalendarObject(visit({ zone, startMs: at(iso) }));
			expect(instantOf(text, 'dtstart')).toBe(at(iso));
			expect(instantOf(text, 'dtend')).toBe(at(iso) + 75 * MINUTE_MS);
		}
	});

	it.each([
		['2027-10-31T00:30Z', 'Europe/Berlin'],
		['2027-10-31T01:30Z', 'Europe/Berlin'],
		['2027-11-07T06:30Z', 'America/New_York'],
		['2027-04-03T15:30Z', 'Australia/Sydney']
	])('writes %s in %s, an hour shown twice, in UTC without a zone (case T6)', (iso, zone) => {
		const text = buildCalendarObject(visit({ zone, startMs: at(iso) }));
		expect(text).toContain(`DTSTART:${iso.replace(/[-:]/g, '').replace('Z', '00Z')}`);
		expect(text).not.toContain('TZID');
		expect(text).not.toContain('VTIMEZONE');
	});

	it('keeps 90 minutes over the spring change (case T8)', () => {
		const startMs = at('2027-03-28T00:30Z');
		const text = buildCalendarObject(
			visit({ zone: 'Europe/Berlin', startMs, endMs: startMs + 90 * MINUTE_MS })
		);
		expect(text).toContain('DTSTART;TZID=Europe/Berlin:20270328T013000');
		expect(text).toContain('DTEND;TZID=Europe/Berlin:20270328T040000');
	});

	it('writes UTC where the zone list has no rules for the zone', () => {
		const text = buildCalendarObject(visit({ zone: 'UTC' }));
		expect(text).toContain('DTSTART:20270311T103000Z');
	});

	it('is right for every zone the runtime lists, whatever zone data say', () => {
		for (const zone of Intl.supportedValuesOf('timeZone')) {
			const text = buildCalendarObject(visit({ zone, startMs: at('2027-07-15T08:30Z') }));
			expect(instantOf(text, 'dtstart'), zone).toBe(at('2027-07-15T08:30Z'));
		}
	}, 60_000);
});

describe('calendar object: scheduling (checklist B)', () => {
	it('asks one person for an answer, with everything a request needs', () => {
		const text = buildCalendarObject(visit());
		const event = eventOf(text);
		for (const name of [
			'uid',
			'dtstamp',
			'dtstart',
			'organizer',
			'attendee',
			'summary',
			'sequence'
		]) {
			expect(event.getAllProperties(name), name).toHaveLength(1);
		}
		const unfolded = text.replaceAll('\r\n ', '');
		expect(unfolded).toMatch(/ATTENDEE;[^\r]*RSVP=TRUE[^\r]*:mailto:anna@people\.example/);
		expect(unfolded).toMatch(/ATTENDEE;[^\r]*PARTSTAT=NEEDS-ACTION[;:]/);
		expect(unfolded).toMatch(/ATTENDEE;[^\r]*ROLE=REQ-PARTICIPANT[;:]/);
		expect(unfolded).toMatch(/ATTENDEE;[^\r]*CUTYPE=INDIVIDUAL[;:]/);
		expect(unfolded).toContain(':mailto:lab@ovalry.example');
		expect(text).not.toContain('SENT-BY');
		expect(text).not.toContain('RRULE:FREQ=DAILY');
	});

	it('moves the same event with a higher sequence and asks again (case T13)', () => {
		const first = buildCalendarObject(visit());
		const moved = buildCalendarObject(
			visit({ sequence: 1, stampMs: at('2027-03-02T09:00Z'), startMs: at('2027-03-11T14:00Z') })
		);
		expect(value(eventOf(moved), 'uid')).toBe(value(eventOf(first), 'uid'));
		expect(instantOf(moved, 'dtstart')).toBe(at('2027-03-11T14:00Z'));
		expect(value(eventOf(moved), 'dtstamp') > value(eventOf(first), 'dtstamp')).toBe(true);
		expect(moved.replaceAll('\r\n ', '')).toContain('PARTSTAT=NEEDS-ACTION');
	});

	it('keeps the answer when only words change (case T14)', () => {
		const attendee = {
			name: 'Anna Beck',
			email: 'anna@people.example',
			answer: 'ACCEPTED'
		} as const;
		const text = buildCalendarObject(
			visit({ attendee, description: 'Typo mended', stampMs: at('2027-03-03T09:00Z') })
		);
		expect(text.replaceAll('\r\n ', '')).toContain('PARTSTAT=ACCEPTED');
		expect(value(eventOf(text), 'sequence')).toBe('0');
	});

	it('cancels the event itself and frees the time, without a reminder (case T15)', () => {
		const text = buildCalendarObject(visit({ method: 'CANCEL', sequence: 2 }));
		const event = eventOf(text);
		expect(text).toContain('METHOD:CANCEL\r\n');
		expect(value(event, 'status')).toBe('CANCELLED');
		expect(value(event, 'transp')).toBe('TRANSPARENT');
		expect(value(event, 'x-microsoft-cdo-busystatus')).toBe('FREE');
		expect(value(event, 'sequence')).toBe('2');
		expect(event.getAllSubcomponents('valarm')).toHaveLength(0);
		expect(event.getAllProperties('attendee')).toHaveLength(1);
		expect(event.getAllProperties('organizer')).toHaveLength(1);
		expect(event.getAllProperties('dtstart')).toHaveLength(1);
	});
});

import { describe, expect, it } from 'vitest';
import { buildCalendarObject, PRODUCT_ID, type CalendarVisit } from './calendar-object';
import {
	at,
	eventOf,
	parse,
	propertyNames,
	uid,
	value,
	visit
} from '../../../../tests/support/calendar-visit';

const wideTitles = ['Übung der Bewegung ', '運動の練習をする', '👩🏽‍🔬🏃‍♀️'].map((t) => t.repeat(15));

describe('calendar object: form (checklist A)', () => {
	it.each(wideTitles)(
		'keeps lines of "%s" within 75 octets, whole and ended by CRLF',
		(summary) => {
			const text = buildCalendarObject(visit({ summary, description: summary, location: summary }));
			expect(text.endsWith('\r\n')).toBe(true);
			const lines = text.slice(0, -2).split('\r\n');
			expect(Math.max(...lines.map((line) => Buffer.byteLength(line)))).toBeLessThanOrEqual(75);
			expect(lines.some((line) => /[\r\n]/.test(line))).toBe(false);
			expect(lines.every((line) => !/\p{Surrogate}|\uFFFD/u.test(line))).toBe(true);
			expect(value(eventOf(text), 'summary')).toBe(summary.trim());
		}
	);

	it('carries commas, semicolons, backslashes and line ends through unchanged', () => {
		const odd = 'a, b; c\\d\ne "f" \\n g';
		const text = buildCalendarObject(visit({ description: odd, location: odd }));
		expect(value(eventOf(text), 'description')).toBe(odd);
		expect(value(eventOf(text), 'location')).toBe(odd);
		expect(text).toContain('DESCRIPTION:a\\, b\\; c\\\\d\\ne');
	});

	const endings = ['\r\n', '\r', '\n', '\u2028', '\u2029', '\u0085', '\0', '"', '"\r\n'];
	const payloads = endings.map((ending) => `x${ending}ATTENDEE:mailto:e@evil.example`);
	const fields: [string, (payload: string) => Partial<CalendarVisit>][] = [
		['summary', (summary) => ({ summary })],
		['location', (location) => ({ location })],
		['description', (description) => ({ description })],
		['organizer', (name) => ({ organizer: { name, email: 'lab@ovalry.example' } })],
		[
			'attendee',
			(name) => ({ attendee: { name, email: 'anna@people.example', answer: 'NEEDS-ACTION' } })
		]
	];
	it.each(fields)('lets no text of %s become a property', (_field, change) => {
		const harmless = propertyNames(buildCalendarObject(visit(change('x'))));
		for (const payload of payloads) {
			const text = buildCalendarObject(visit(change(payload)));
			expect(propertyNames(text)).toEqual(harmless);
			expect(eventOf(text).getAllProperties('attendee')).toHaveLength(1);
		}
	});

	it.each(payloads)('refuses an address that holds more than an address', (payload) => {
		const attendee = { name: 'A', email: `anna@people.example${payload}`, answer: 'NEEDS-ACTION' };
		expect(() =>
			buildCalendarObject(visit({ attendee: attendee as CalendarVisit['attendee'] }))
		).toThrow(TypeError);
	});

	it('keeps names whole with the one quote a calendar cannot hold replaced', () => {
		const organizer = { name: 'Lab "North"; Hall, 2', email: 'lab@ovalry.example' };
		const text = buildCalendarObject(visit({ organizer }));
		const property = eventOf(text).getFirstProperty('organizer');
		expect(property?.getParameter('cn')).toBe("Lab 'North'; Hall, 2");
	});

	it('is one line, one attendee, 75 octets for the title of case T18', () => {
		const title = 'Übung 練習 👩🏽‍🔬, Raum; "A"\r\nATTENDEE:mailto:e@x '.repeat(5);
		const text = buildCalendarObject(visit({ summary: title }));
		expect(
			Math.max(...text.split('\r\n').map((line) => Buffer.byteLength(line)))
		).toBeLessThanOrEqual(75);
		expect(eventOf(text).getAllProperties('attendee')).toHaveLength(1);
		expect(value(eventOf(text), 'summary')).toBe(title.replaceAll('\r\n', ' ').trim());
	});

	it('names UID, stamp, sequence and product as given', () => {
		const text = buildCalendarObject(visit({ sequence: 3 }));
		expect(value(eventOf(text), 'uid')).toBe(uid);
		expect(text).toContain('DTSTAMP:20270301T120007Z');
		expect(value(eventOf(text), 'sequence')).toBe('3');
		expect(parse(text).getFirstPropertyValue('prodid')).toBe(PRODUCT_ID);
	});

	it('holds VERSION, CALSCALE and METHOD once, in the calendar and not in the event', () => {
		const text = buildCalendarObject(visit());
		expect(text.match(/^METHOD:REQUEST\r$/gm)).toHaveLength(1);
		expect(text.match(/^VERSION:2\.0\r$/gm)).toHaveLength(1);
		expect(text.match(/^CALSCALE:GREGORIAN\r$/gm)).toHaveLength(1);
		expect(eventOf(text).getFirstProperty('method')).toBeNull();
		expect(text).not.toContain('X-PUBLISHED-TTL');
		expect(text).not.toContain('X-MICROSOFT-CDO-APPT-SEQUENCE');
	});

	it('is private, opaque while booked, and asks for no proposal of another time', () => {
		const text = buildCalendarObject(visit());
		expect(value(eventOf(text), 'class')).toBe('PRIVATE');
		expect(value(eventOf(text), 'transp')).toBe('OPAQUE');
		expect(value(eventOf(text), 'status')).toBe('CONFIRMED');
		expect(text).toContain('X-MICROSOFT-DISALLOW-COUNTER:TRUE');
	});

	it('reminds by display in whole minutes', () => {
		const text = buildCalendarObject(visit({ reminderMinutes: [1440, 60] }));
		const alarms = eventOf(text).getAllSubcomponents('valarm');
		expect(alarms.map((alarm) => value(alarm, 'action'))).toEqual(['DISPLAY', 'DISPLAY']);
		expect(text).toMatch(/TRIGGER:-PT1440M/);
		expect(alarms.every((alarm) => value(alarm, 'description').length > 0)).toBe(true);
	});

	it('links to the visit’s page, also on this machine', () => {
		const url = 'http://localhost:3000/visit/AbC-_1';
		expect(value(eventOf(buildCalendarObject(visit({ url }))), 'url')).toBe(url);
	});

	it.each([
		['a sequence below 0', { sequence: -1 }],
		['half a sequence', { sequence: 0.5 }],
		['an end before the start', { endMs: at('2027-03-11T10:00Z') }],
		['an end at the start', { endMs: at('2027-03-11T10:30Z') }],
		['a UID with spaces', { uid: 'my visit' }],
		['a reminder at the start', { reminderMinutes: [0] }]
	])('refuses %s', (_what, change) => {
		expect(() => buildCalendarObject(visit(change))).toThrow(RangeError);
	});
});

import { describe, expect, it } from 'vitest';
import {
	formatDay,
	formatDayTime,
	formatRange,
	formatShortDay,
	formatTime,
	formatWithZone
} from './format-instant';
import { zoneCity, zoneLabel } from './zone-label';

const at = (iso: string) => Date.parse(iso);

describe('instants for people', () => {
	it('names day, time, city and offset', () => {
		const ms = at('2027-03-11T10:24Z');
		expect(formatWithZone(ms, 'Europe/Lisbon')).toBe('Thu 11 March 2027, 10:24 Lisbon (UTC+0)');
		expect(formatDay(ms, 'Europe/Lisbon')).toBe('Thu 11 March 2027');
		expect(formatShortDay(ms, 'Europe/Lisbon')).toBe('Thu 11 Mar');
		expect(formatTime(ms, 'Asia/Kolkata')).toBe('15:54');
		expect(formatDayTime(ms, 'UTC', 'en-GB')).toBe('Thu 11 March 2027, 10:24');
	});

	it('tells New York 10:00 on 15 March and 09:00 on 29 March for 15:00 in Berlin (case T12)', () => {
		expect(formatWithZone(at('2027-03-15T14:00Z'), 'America/New_York')).toBe(
			'Mon 15 March 2027, 10:00 New York (UTC-4)'
		);
		expect(formatWithZone(at('2027-03-29T13:00Z'), 'America/New_York')).toBe(
			'Mon 29 March 2027, 09:00 New York (UTC-4)'
		);
	});

	it('writes a range once per day and names both days over midnight', () => {
		const startMs = at('2027-03-28T00:30Z');
		expect(formatRange(startMs, startMs + 90 * 60_000, 'Europe/Berlin')).toBe(
			'Sun 28 March 2027, 01:30 to 04:00'
		);
		expect(formatRange(at('2027-03-11T23:30Z'), at('2027-03-12T00:30Z'), 'UTC')).toBe(
			'Thu 11 March 2027, 23:30 to Fri 12 March 2027, 00:30'
		);
	});

	it('writes another language in its own order', () => {
		expect(formatDay(at('2027-03-11T10:24Z'), 'Europe/Berlin', 'de')).toMatch(/11\. März 2027/);
	});

	it('labels zones by city and offset', () => {
		expect(zoneCity('America/Argentina/Buenos_Aires')).toBe('Buenos Aires');
		expect(zoneLabel(at('2027-03-11T10:24Z'), 'Asia/Kathmandu')).toBe('Kathmandu (UTC+5:45)');
		expect(zoneLabel(at('2027-03-11T10:24Z'), 'UTC')).toBe('UTC');
	});
});

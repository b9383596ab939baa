import { describe, expect, it } from 'vitest';
import { localDateOf, utcOffsetMinutes, wallClock } from './wall-clock';

const at = (iso: string) => Date.parse(iso);

describe('wall clock', () => {
	it('shows 09:00 in Berlin on both sides of the spring change (case T1)', () => {
		expect(wallClock(at('2027-03-27T08:00Z'), 'Europe/Berlin')).toBe('2027-03-27T09:00:00');
		expect(wallClock(at('2027-03-28T07:00Z'), 'Europe/Berlin')).toBe('2027-03-28T09:00:00');
	});

	it('shows a visit of 90 minutes over the gap as 01:30 to 04:00 (case T8)', () => {
		const startMs = at('2027-03-28T00:30Z');
		expect(wallClock(startMs, 'Europe/Berlin')).toBe('2027-03-28T01:30:00');
		expect(wallClock(startMs + 90 * 60_000, 'Europe/Berlin')).toBe('2027-03-28T04:00:00');
	});

	it('shows midnight as 00:00 and never as 24:00', () => {
		expect(wallClock(at('2027-07-01T00:00Z'), 'UTC')).toBe('2027-07-01T00:00:00');
	});

	it('knows offsets of half and quarter hours and their sign', () => {
		expect(utcOffsetMinutes(at('2027-03-28T00:00Z'), 'Asia/Kolkata')).toBe(330);
		expect(utcOffsetMinutes(at('2027-03-28T00:00Z'), 'Asia/Kathmandu')).toBe(345);
		expect(utcOffsetMinutes(at('2027-03-15T14:00Z'), 'America/New_York')).toBe(-240);
	});

	it('names the local date on either side of the date line', () => {
		expect(localDateOf(at('2027-03-28T12:00Z'), 'Pacific/Auckland')).toBe('2027-03-29');
		expect(localDateOf(at('2027-03-28T08:00Z'), 'Pacific/Honolulu')).toBe('2027-03-27');
	});

	it('refuses what is no instant and a zone that does not exist', () => {
		expect(() => wallClock(Number.NaN, 'UTC')).toThrow(RangeError);
		expect(() => wallClock(0, 'Europe/Lisboa')).toThrow(RangeError);
	});
});

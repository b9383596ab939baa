import { describe, expect, it } from 'vitest';
import { addDaysToDate, addLocalDays } from './add-local-days';
import { startOfLocalDate, startOfLocalDay, startOfNextLocalDay } from './start-of-local-day';

const at = (iso: string) => Date.parse(iso);

describe('adding local days', () => {
	it.each([
		['2027-03-28T07:00Z', 'Europe/Berlin', '2027-03-27T08:00Z'],
		['2027-10-31T08:00Z', 'Europe/Berlin', '2027-10-30T07:00Z'],
		['2027-11-07T14:00Z', 'America/New_York', '2027-11-06T13:00Z'],
		['2027-10-02T22:00Z', 'Australia/Sydney', '2027-10-01T23:00Z']
	])('the day before %s in %s, same clock, is %s (cases T9, T10)', (visit, zone, dayBefore) => {
		expect(addLocalDays(at(visit), -1, zone)).toEqual([at(dayBefore)]);
	});

	it('answers none in a gap and two in an overlap', () => {
		expect(addLocalDays(at('2027-03-27T01:30Z'), 1, 'Europe/Berlin')).toEqual([]);
		expect(addLocalDays(at('2027-10-30T00:30Z'), 1, 'Europe/Berlin')).toHaveLength(2);
	});

	it('keeps milliseconds and crosses months and leap days', () => {
		expect(addLocalDays(at('2027-06-01T10:00:00.250Z'), 1, 'UTC')).toEqual([
			at('2027-06-02T10:00:00.250Z')
		]);
		expect(addDaysToDate('2028-02-28', 1)).toBe('2028-02-29');
		expect(addDaysToDate('2027-01-01', -1)).toBe('2026-12-31');
	});

	it('refuses part of a day', () => {
		expect(() => addDaysToDate('2027-01-01', 0.5)).toThrow(RangeError);
	});
});

describe('start of a local day', () => {
	it('is midnight on the wall, also on days of 23 and 25 hours', () => {
		const springMs = startOfLocalDay(at('2027-03-28T12:00Z'), 'Europe/Berlin');
		expect(springMs).toBe(at('2027-03-27T23:00Z'));
		expect(startOfNextLocalDay(springMs, 'Europe/Berlin') - springMs).toBe(23 * 3_600_000);
		const autumnMs = startOfLocalDay(at('2027-10-31T12:00Z'), 'Europe/Berlin');
		expect(startOfNextLocalDay(autumnMs, 'Europe/Berlin') - autumnMs).toBe(25 * 3_600_000);
	});

	it('is 01:00 where clocks jump over midnight, as Santiago did on 8 September 2024', () => {
		expect(startOfLocalDate('2024-09-08', 'America/Santiago')).toBe(at('2024-09-08T04:00Z'));
	});

	it('is the first midnight where midnight is shown twice, as Havana did on 5 November 2023', () => {
		expect(startOfLocalDate('2023-11-05', 'America/Havana')).toBe(at('2023-11-05T04:00Z'));
	});
});

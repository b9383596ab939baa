import { describe, expect, it } from 'vitest';
import { isInClockOverlap, localToInstants, oneInstant } from './local-to-instants';

const utc = (local: string, zone: string) =>
	localToInstants(local, zone).map((ms) => new Date(ms).toISOString().slice(0, 16) + 'Z');

describe('local time to instants', () => {
	it.each([
		['2027-03-27T09:00', 'Europe/Berlin', '2027-03-27T08:00Z'],
		['2027-03-28T09:00', 'Europe/Berlin', '2027-03-28T07:00Z'],
		['2027-03-29T09:00', 'Europe/Berlin', '2027-03-29T07:00Z'],
		['2027-10-30T09:00', 'Europe/Berlin', '2027-10-30T07:00Z'],
		['2027-10-31T09:00', 'Europe/Berlin', '2027-10-31T08:00Z'],
		['2027-03-13T09:00', 'America/New_York', '2027-03-13T14:00Z'],
		['2027-03-14T09:00', 'America/New_York', '2027-03-14T13:00Z'],
		['2027-11-06T09:00', 'America/New_York', '2027-11-06T13:00Z'],
		['2027-11-07T09:00', 'America/New_York', '2027-11-07T14:00Z'],
		['2027-04-03T09:00', 'Australia/Sydney', '2027-04-02T22:00Z'],
		['2027-04-04T09:00', 'Australia/Sydney', '2027-04-03T23:00Z'],
		['2027-10-02T09:00', 'Australia/Sydney', '2027-10-01T23:00Z'],
		['2027-10-03T09:00', 'Australia/Sydney', '2027-10-02T22:00Z'],
		['2027-03-28T09:00', 'Asia/Kolkata', '2027-03-28T03:30Z'],
		['2027-10-31T09:00', 'Asia/Kolkata', '2027-10-31T03:30Z'],
		['2027-03-15T15:00', 'Europe/Berlin', '2027-03-15T14:00Z'],
		['2027-03-29T15:00', 'Europe/Berlin', '2027-03-29T13:00Z']
	])('%s in %s is the one instant %s (cases T1 to T5, T12)', (local, zone, instant) => {
		expect(utc(local, zone)).toEqual([instant]);
	});

	it.each([
		['2027-10-31T02:30', 'Europe/Berlin', ['2027-10-31T00:30Z', '2027-10-31T01:30Z']],
		['2027-11-07T01:30', 'America/New_York', ['2027-11-07T05:30Z', '2027-11-07T06:30Z']],
		['2027-04-04T02:30', 'Australia/Sydney', ['2027-04-03T15:30Z', '2027-04-03T16:30Z']]
	])('%s in %s happens twice (case T6)', (local, zone, both) => {
		expect(utc(local, zone)).toEqual(both);
		expect(oneInstant(local, zone)).toMatchObject({ ok: false, reason: 'clock-overlap' });
		expect(isInClockOverlap(Date.parse(both[0] ?? ''), zone)).toBe(true);
	});

	it.each([
		['2027-03-28T02:30', 'Europe/Berlin'],
		['2027-03-14T02:30', 'America/New_York'],
		['2027-10-03T02:30', 'Australia/Sydney']
	])('%s in %s never happens (case T7)', (local, zone) => {
		expect(localToInstants(local, zone)).toEqual([]);
		expect(oneInstant(local, zone)).toEqual({ ok: false, reason: 'clock-gap' });
	});

	it('finds the half-hour overlap of Lord Howe Island', () => {
		expect(localToInstants('2027-04-04T01:45', 'Australia/Lord_Howe')).toHaveLength(2);
		expect(localToInstants('2027-04-04T01:15', 'Australia/Lord_Howe')).toHaveLength(1);
	});

	it.each(['2027-03-28', '2027-3-28T09:00', '2027-02-30T09:00', '2027-03-28T24:30', 'tomorrow'])(
		'refuses "%s", which is no local time',
		(local) => {
			expect(() => localToInstants(local, 'Europe/Berlin')).toThrow(RangeError);
		}
	);
});

import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { circularMinutes, DAY_MS, toDayNumber, toLocalDate, toWeekday } from './local-date.ts';
import { resolveLocalStart } from './resolve-local-start.ts';
import { getZoneClock } from './zone-clock.ts';

const ZONES = [
	...['UTC', 'Europe/Berlin', 'Europe/Lisbon', 'Europe/Dublin', 'America/New_York'],
	...['America/Sao_Paulo', 'Asia/Kolkata', 'Asia/Kathmandu', 'Australia/Sydney'],
	...['Australia/Lord_Howe', 'Pacific/Apia']
];

function instantsOf(date: string, time: string, zone: string): string[] {
	const [hour = '', minute = ''] = time.split(':');
	const local = { dayNumber: toDayNumber(date), minute: Number(hour) * 60 + Number(minute) };
	return getZoneClock(zone)
		.findInstants(local)
		.map((ms) => new Date(ms).toISOString().slice(0, 16));
}

describe('local times become instants', () => {
	// Method sheet "Calendar", cases T1 to T5.
	it.each([
		['2027-03-27', '09:00', 'Europe/Berlin', '2027-03-27T08:00'],
		['2027-03-28', '09:00', 'Europe/Berlin', '2027-03-28T07:00'],
		['2027-10-30', '09:00', 'Europe/Berlin', '2027-10-30T07:00'],
		['2027-10-31', '09:00', 'Europe/Berlin', '2027-10-31T08:00'],
		['2027-03-13', '09:00', 'America/New_York', '2027-03-13T14:00'],
		['2027-03-14', '09:00', 'America/New_York', '2027-03-14T13:00'],
		['2027-04-03', '09:00', 'Australia/Sydney', '2027-04-02T22:00'],
		['2027-04-04', '09:00', 'Australia/Sydney', '2027-04-03T23:00'],
		['2027-10-31', '09:00', 'Asia/Kolkata', '2027-10-31T03:30']
	])('%s %s in %s is %s UTC', (date, time, zone, instant) => {
		expect(instantsOf(date, time, zone)).toEqual([instant]);
	});

	// Case T6.
	it.each([
		['2027-10-31', '02:30', 'Europe/Berlin', ['2027-10-31T00:30', '2027-10-31T01:30']],
		['2027-11-07', '01:30', 'America/New_York', ['2027-11-07T05:30', '2027-11-07T06:30']],
		['2027-04-04', '02:30', 'Australia/Sydney', ['2027-04-03T15:30', '2027-04-03T16:30']]
	])('%s %s in %s happens twice', (date, time, zone, instants) => {
		expect(instantsOf(date, time, zone)).toEqual(instants);
	});

	// Case T7, and a midnight that does not exist.
	it.each([
		['2027-03-28', '02:30', 'Europe/Berlin'],
		['2027-03-14', '02:30', 'America/New_York'],
		['2027-10-03', '02:30', 'Australia/Sydney'],
		['2018-11-04', '00:00', 'America/Sao_Paulo']
	])('%s %s in %s does not happen', (date, time, zone) => {
		expect(instantsOf(date, time, zone)).toEqual([]);
	});

	it('a start typed into a gap of the clocks is a broken rule, never another time', () => {
		const start = { visitNumber: 3, date: '2027-03-28', minute: 150, zone: 'Europe/Berlin' };
		expect(resolveLocalStart(start)).toEqual({
			ok: false,
			broken: {
				rule: 'clock-change-gap',
				visitNumber: 3,
				startMs: null,
				date: '2027-03-28',
				minute: 150
			}
		});
		expect(resolveLocalStart({ ...start, date: '2027-10-31' })).toEqual({
			ok: true,
			instants: [Date.UTC(2027, 9, 31, 0, 30), Date.UTC(2027, 9, 31, 1, 30)]
		});
	});

	it('every instant is among the instants of its own local time', () => {
		const minutes = fc.integer({ min: 25_000_000, max: 32_000_000 });
		const property = fc.property(fc.constantFrom(...ZONES), minutes, (zone, minute) => {
			const clock = getZoneClock(zone);
			expect(clock.findInstants(clock.read(minute * 60_000))).toContain(minute * 60_000);
		});
		fc.assert(property, { seed: 11, numRuns: 400 });
	});

	it('local days last 23 and 25 hours where clocks change', () => {
		const hours = (date: string) => {
			const clock = getZoneClock('Europe/Berlin');
			const [from = 0] = clock.findInstants({ dayNumber: toDayNumber(date), minute: 0 });
			const [to = 0] = clock.findInstants({ dayNumber: toDayNumber(date) + 1, minute: 0 });
			return (to - from) / 3_600_000;
		};
		expect([hours('2026-03-29'), hours('2026-10-25'), hours('2026-10-26')]).toEqual([23, 25, 24]);
	});
});

describe('dates', () => {
	it('dates and day numbers turn into each other as the runtime counts them', () => {
		fc.assert(
			fc.property(fc.integer({ min: -200_000, max: 200_000 }), (dayNumber) => {
				const date = new Date(dayNumber * DAY_MS);
				expect(toLocalDate(dayNumber)).toBe(date.toISOString().slice(0, 10));
				expect(toDayNumber(toLocalDate(dayNumber))).toBe(dayNumber);
				expect(toWeekday(dayNumber) % 7).toBe(date.getUTCDay());
			}),
			{ seed: 12 }
		);
	});

	it.each(['2027-02-29', '2027-13-01', '27-01-01', ''])('%j is no date', (text) => {
		expect(() => toDayNumber(text)).toThrow(RangeError);
	});

	it('23:45 and 00:15 are half an hour apart', () => {
		expect(circularMinutes(1425, 15)).toBe(30);
		expect(circularMinutes(0, 720)).toBe(720);
	});
});

import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { covers, subtractIntervals } from './intervals.ts';
import { HOUR_MS, MINUTE_MS } from './local-date.ts';
import { at } from '../../tests/support/booking/example-problem.ts';
import type { Weekday, WeeklyWindow } from './types.ts';
import { expandWeeklyHours, liesInsideHours } from './weekly-hours.ts';

const SUNDAY_NIGHT: WeeklyWindow[] = [{ weekday: 7, fromMinute: 60, toMinute: 240 }];

function lengthHours(fromDate: string, toDate: string): number[] {
	const range = {
		fromMs: at(fromDate, '12:00', 'Europe/Berlin'),
		toMs: at(toDate, '12:00', 'Europe/Berlin')
	};
	const open = expandWeeklyHours(SUNDAY_NIGHT, 'Europe/Berlin', range);
	return open.map(({ fromMs, toMs }) => (toMs - fromMs) / HOUR_MS);
}

describe('weekly hours over a change of clocks', () => {
	it('three hours by the clock last two in spring and four in autumn', () => {
		expect(lengthHours('2027-03-27', '2027-03-28')).toEqual([2]);
		expect(lengthHours('2027-10-30', '2027-10-31')).toEqual([4]);
		expect(lengthHours('2027-11-06', '2027-11-07')).toEqual([3]);
	});

	it('windows that meet at midnight join', () => {
		const hours: WeeklyWindow[] = [
			{ weekday: 5, fromMinute: 1320, toMinute: 1440 },
			{ weekday: 6, fromMinute: 0, toMinute: 120 }
		];
		const night = { fromMs: at('2027-02-26', '23:30'), toMs: at('2027-02-27', '00:45') };
		expect(liesInsideHours(night, hours, 'Europe/Lisbon')).toBe(true);
		const range = { fromMs: at('2027-02-24', '00:00'), toMs: at('2027-03-01', '00:00') };
		expect(expandWeeklyHours(hours, 'Europe/Lisbon', range)).toEqual([
			{ fromMs: at('2027-02-26', '22:00'), toMs: at('2027-02-27', '02:00') }
		]);
	});

	it('expanded intervals hold exactly what the clock reads as open, whatever the zone', () => {
		const window = fc
			.tuple(
				fc.integer({ min: 1, max: 7 }),
				fc.integer({ min: 0, max: 95 }),
				fc.integer({ min: 1, max: 60 })
			)
			.map(([weekday, from, length]): WeeklyWindow => {
				const fromMinute = from * 15;
				const toMinute = Math.min(1440, fromMinute + length * 15);
				return { weekday: weekday as Weekday, fromMinute, toMinute };
			});
		const zone = fc.constantFrom('Europe/Lisbon', 'America/New_York', 'Australia/Lord_Howe');
		// The weeks of 28 March, 14 March, 3 and 4 October and 4 April 2027 hold clock changes.
		const week = fc.constantFrom('2027-03-10', '2027-03-24', '2027-03-31', '2027-09-29');
		const property = fc.property(
			fc.array(window, { maxLength: 8 }),
			zone,
			week,
			fc.integer({ min: 0, max: 7 * 96 }),
			fc.integer({ min: 1, max: 200 }),
			(hours, zoneName, date, slot, minutes) => {
				const weekMs = at(date, '00:00', 'UTC');
				const range = { fromMs: weekMs - 3 * 24 * HOUR_MS, toMs: weekMs + 12 * 24 * HOUR_MS };
				const fromMs = weekMs + slot * 15 * MINUTE_MS;
				const stretch = { fromMs, toMs: fromMs + minutes * MINUTE_MS };
				const open = expandWeeklyHours(hours, zoneName, range);
				expect(covers(open, stretch)).toBe(liesInsideHours(stretch, hours, zoneName));
			}
		);
		fc.assert(property, { seed: 21, numRuns: 600 });
	});

	it('what is taken is cut out of what is open', () => {
		const open = [{ fromMs: 0, toMs: 10 }];
		const busy = [
			{ fromMs: 4, toMs: 5 },
			{ fromMs: 9, toMs: 12 },
			{ fromMs: -2, toMs: 1 }
		];
		expect(subtractIntervals(open, busy)).toEqual([
			{ fromMs: 1, toMs: 4 },
			{ fromMs: 5, toMs: 9 }
		]);
	});
});

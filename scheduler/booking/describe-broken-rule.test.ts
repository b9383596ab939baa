import { describe, expect, it } from 'vitest';
import { at, makeVisit, RETENTION_GAP } from '../../tests/support/booking/example-problem.ts';
import type { DescribeContext } from './booking-words.ts';
import { RULE_ORDER, type BrokenRule } from './broken-rule.ts';
import { describeBrokenRule } from './describe-broken-rule.ts';

const CONTEXT: DescribeContext = {
	zone: 'Europe/Lisbon',
	visits: [
		...[1, 2, 3, 4, 5, 6].map((number) => makeVisit(number)),
		makeVisit(7, { kind: 'retention', gapBefore: RETENTION_GAP })
	],
	names: new Map([
		['rig-1', 'Gull'],
		['room-1', 'Room 2.07'],
		['staff-1', 'Mirela A.']
	])
};
const span = { fromMs: at('2027-03-19', '13:45'), toMs: at('2027-03-19', '15:00') };
const gap = { previousVisitNumber: 6, minHours: 20, maxHours: 28 };
const there = { visitNumber: 6, startMs: at('2027-03-19', '14:00') };

/** Every rule once, with the sentence it must give. */
const CASES: [BrokenRule, string, string][] = [
	[
		{
			rule: 'gap-too-short',
			visitNumber: 7,
			startMs: at('2027-03-25', '12:30'),
			previousVisitNumber: 6,
			gapHours: 142.5,
			minHours: 144,
			maxHours: 192,
			kind: 'retention'
		},
		'retention window',
		'Retention window. Day 7, Thu 25 March 12:30, would come 142.5 h later; the protocol wants 144 to 192 h.'
	],
	[
		{ rule: 'gap-too-long', ...there, ...gap, gapHours: 28.25, kind: 'practice' },
		'gap 20–28 h',
		'Gap in hours. Day 6, Fri 19 March 14:00, would come 28.25 h later; the protocol wants 20 to 28 h.'
	],
	[
		{
			...{ rule: 'pause-used-up', ...there, ...gap, gapHours: 72, kind: 'practice' },
			...{ allowedCount: 1, usedCount: 1 }
		},
		'pause used',
		'Pause used up. Day 6, Fri 19 March 14:00, would come 72 h later; the protocol wants 20 to 28 h, and the one longer gap a chain may hold is used.'
	],
	[
		{ rule: 'nights', ...there, previousVisitNumber: 5, nights: 0, minNights: 1 },
		'night between',
		'Night between. No night lies between Day 5 and Day 6; the protocol wants at least 1.'
	],
	[
		{ rule: 'order', ...there, previousVisitNumber: 5, previousEndMs: at('2027-03-19', '14:30') },
		'order of days',
		'Order of days. Day 6 would start before Day 5 ends, Fri 19 March 14:30.'
	],
	[
		{ rule: 'clock-window', ...there, startMinute: 840, earliestMinute: 540, latestMinute: 780 },
		'hours of the day',
		'Hours of the day. Day 6 would start at 14:00; the protocol wants starts from 09:00 to 13:00.'
	],
	[
		{
			...{ rule: 'same-time', ...there, startMinute: 840, firstStartMinute: 660 },
			...{ differenceMinutes: 180, toleranceMinutes: 120 }
		},
		'own clock',
		'Own clock. Day 6 would be 3 h off their 11:00; the limit is 2 h.'
	],
	[
		{ rule: 'weekday', ...there, weekday: 5, allowedWeekdays: [1, 2, 3] },
		'weekday',
		'Weekday. Day 6 would fall on a Fri; the protocol wants Mon, Tue, Wed.'
	],
	[
		{ rule: 'holiday', ...there, date: '2027-03-26' },
		'closed',
		'Closed. The lab is closed on Fri 26 March.'
	],
	[
		{ rule: 'rig-hours', ...there, rigId: 'rig-1', occupied: span },
		'rig hours',
		'Rig hours. Gull does not run for all of 13:45 to 15:00, set-up and clean-up included.'
	],
	[
		{ rule: 'rig-busy', ...there, rigId: 'rig-1', busy: span },
		'rig taken',
		'Rig taken. Gull is taken from 13:45 to 15:00.'
	],
	[
		{ rule: 'room-busy', ...there, roomId: 'room-1', busy: span },
		'room taken',
		'Room taken. Room 2.07 is taken from 13:45 to 15:00.'
	],
	[
		{ rule: 'staff-hours', ...there, staffId: 'staff-1', occupied: span },
		'staff hours',
		'Staff hours. Mirela A. is not on duty for all of 13:45 to 15:00, set-up and clean-up included.'
	],
	[
		{ rule: 'staff-busy', ...there, staffId: 'unnamed', busy: span },
		'staff taken',
		'Staff taken. unnamed is taken from 13:45 to 15:00.'
	],
	[
		{ rule: 'person-busy', ...there, busy: { ...span, toMs: at('2027-03-20', '08:00') } },
		'they cannot',
		'They cannot. This person is taken from 13:45 to Sat 20 March 08:00.'
	],
	[
		{ rule: 'availability', ...there, visit: span, zone: 'Europe/Madrid' },
		'they cannot',
		'They cannot. 13:45 to 15:00 (14:45 to 16:00 on their clock) is not inside the hours this person gave.'
	],
	[
		{ rule: 'before-earliest-start', ...there, earliestStartMs: at('2027-03-22', '09:00') },
		'earliest start',
		"Earliest start. Day 6 would start before this person's earliest start, Mon 22 March 09:00."
	],
	[
		{ rule: 'in-the-past', ...there, nowMs: at('2027-03-19', '14:05') },
		'over',
		'Already over. Day 6 would start before now, Fri 19 March 14:05.'
	],
	[
		{ rule: 'clock-change-gap', visitNumber: 6, startMs: null, date: '2027-03-28', minute: 75 },
		'no such time',
		'No such time. On Sun 28 March the clocks jump over 01:15. Choose another time.'
	]
];

describe('broken rules in plain words', () => {
	it.each(CASES)('$rule', (broken, short, sentence) => {
		expect(describeBrokenRule(broken, CONTEXT)).toEqual({ short, sentence });
	});

	it('every rule has words', () => {
		expect(new Set(CASES.map(([{ rule }]) => rule))).toEqual(new Set(RULE_ORDER));
	});
});

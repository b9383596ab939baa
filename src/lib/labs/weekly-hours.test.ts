import { expect, test } from 'vitest';
import { formatWeeklyHours, parseWeeklyHours, sumHours } from './weekly-hours';

test('a working week is one line', () => {
	const found = parseWeeklyHours('Mon-Fri 09:00-17:00');
	expect(found).toEqual({
		ok: true,
		hours: [1, 2, 3, 4, 5].map((weekday) => ({
			weekday,
			opensMinute: 540,
			closesMinute: 1020
		}))
	});
	expect(found.ok && sumHours(found.hours)).toBe(40);
});

test.each([
	['Mon – Fri 9–17', 'Mon-Fri 09:00-17:00'],
	['monday to friday 9.30 to 12.00', 'Mon-Fri 09:30-12:00'],
	['Weekdays: 09:00-12:00, 13:00-17:00', 'Mon-Fri 09:00-12:00, 13:00-17:00'],
	['Mon, Wed and Fri 08:00-10:00', 'Mon, Wed, Fri 08:00-10:00'],
	['Sat-Mon 10:00-14:00', 'Mon, Sat, Sun 10:00-14:00'],
	['daily 0:00-24:00', 'Mon-Sun 00:00-24:00'],
	['Tue 9h30-11h00\n\nSat 10-12', 'Tue 09:30-11:00\nSat 10:00-12:00'],
	['Mon 13:00-17:00\nMon 09:00-12:00', 'Mon 09:00-12:00, 13:00-17:00'],
	['', '']
])('%j is read as %j', (typed, written) => {
	const found = parseWeeklyHours(typed);
	expect(found.ok && formatWeeklyHours(found.hours)).toBe(written);
});

test('what is written is read back the same', () => {
	const text = 'Mon-Wed 09:00-12:00, 13:00-17:00\nThu, Sat 10:00-14:30';
	const found = parseWeeklyHours(text);
	expect(found.ok && formatWeeklyHours(found.hours)).toBe(text);
});

test.each([
	['09:00-17:00', 'no-days'],
	['Mon-Fri', 'no-time'],
	['Mon-Foo 09:00-17:00', 'unknown-day'],
	['M 09:00-17:00', 'unknown-day'],
	['Mon 09:00', 'bad-time'],
	['Mon 09:75-17:00', 'bad-time'],
	['Mon 09:00-25:00', 'bad-time'],
	['Mon 17:00-09:00', 'ends-first'],
	['Mon 09:00-09:00', 'ends-first'],
	['Mon 09:00-12:00, 11:00-13:00', 'overlap']
])('%j is refused: %s', (typed, reason) => {
	expect(parseWeeklyHours(typed)).toEqual({
		ok: false,
		faults: [{ line: 1, text: typed, reason }]
	});
});

test('every faulty line is named, and none of the others kept', () => {
	const found = parseWeeklyHours('Mon 09:00-12:00\nTue\nMon 10:00-11:00');
	expect(found).toEqual({
		ok: false,
		faults: [
			{ line: 2, text: 'Tue', reason: 'no-time' },
			{ line: 3, text: 'Mon 10:00-11:00', reason: 'overlap' }
		]
	});
});

import { expect, test } from 'vitest';
import { parseHolidayLines } from './holiday-lines';

test('one line is one closed day with its name', () => {
	expect(parseHolidayLines('2027-04-02 Good Friday')).toEqual({
		ok: true,
		holidays: [{ on: '2027-04-02', name: 'Good Friday' }]
	});
});

test('two dates close every day from the first to the last', () => {
	const found = parseHolidayLines('2027-12-31 to 2028-01-02, Winter break');
	expect(found).toEqual({
		ok: true,
		holidays: ['2027-12-31', '2028-01-01', '2028-01-02'].map((on) => ({
			on,
			name: 'Winter break'
		}))
	});
});

test('a date without a name is closed all the same', () => {
	expect(parseHolidayLines('2027-06-10')).toEqual({
		ok: true,
		holidays: [{ on: '2027-06-10', name: 'Closed' }]
	});
});

test('every faulty line is named with what is wrong', () => {
	const found = parseHolidayLines(
		'2027-02-30 Nothing\n\n2027-05-01 May Day\nGood Friday\n2027-05-03 to 2027-05-01 Back'
	);
	expect(found.ok).toBe(false);
	expect(!found.ok && found.faults).toEqual([
		{ line: 1, message: 'the calendar has no 2027-02-30.' },
		{
			line: 4,
			message: '“Good Friday” does not begin with a date. Write such as 2027-04-02 Good Friday.'
		},
		{ line: 5, message: '2027-05-01 comes before 2027-05-03.' }
	]);
});

test('a closure of years is refused', () => {
	const found = parseHolidayLines('2027-01-01 to 2029-01-01 Sabbatical');
	expect(!found.ok && found.faults[0]?.message).toContain('more than 60 days');
});

import type { LocalDate, Weekday } from './types.ts';

export const MINUTE_MS = 60_000;
export const HOUR_MS = 3_600_000;
export const DAY_MS = 86_400_000;

/** Days from 1970-01-01 to a date of the Gregorian calendar. */
export function countDays(year: number, month: number, day: number): number {
	const shifted = month <= 2 ? year - 1 : year;
	const era = Math.floor(shifted / 400);
	const yearOfEra = shifted - era * 400;
	const dayOfYear = Math.floor((153 * ((month + 9) % 12) + 2) / 5) + day - 1;
	const leapDays = Math.floor(yearOfEra / 4) - Math.floor(yearOfEra / 100);
	return era * 146_097 + yearOfEra * 365 + leapDays + dayOfYear - 719_468;
}

/**
 * Number of days from 1970-01-01 to a local date.
 * @throws RangeError when the text is no date of the form 2027-03-28
 */
export function toDayNumber(date: LocalDate): number {
	const match = /^(\d{4})-(\d{2})-(\d{2})$/.exec(date);
	const dayNumber = match ? countDays(Number(match[1]), Number(match[2]), Number(match[3])) : NaN;
	if (toLocalDate(dayNumber) !== date) throw new RangeError(`not a date (2027-03-28): ${date}`);
	return dayNumber;
}

/** The local date, '2027-03-28', of a number of days since 1970-01-01. */
export function toLocalDate(dayNumber: number): LocalDate {
	const shifted = dayNumber + 719_468;
	const era = Math.floor(shifted / 146_097);
	const dayOfEra = shifted - era * 146_097;
	const leap = Math.floor(dayOfEra / 1460) - Math.floor(dayOfEra / 36_524);
	const yearOfEra = Math.floor((dayOfEra - leap + Math.floor(dayOfEra / 146_096)) / 365);
	const leapDays = Math.floor(yearOfEra / 4) - Math.floor(yearOfEra / 100);
	const dayOfYear = dayOfEra - (365 * yearOfEra + leapDays);
	const monthShift = Math.floor((5 * dayOfYear + 2) / 153);
	const day = dayOfYear - Math.floor((153 * monthShift + 2) / 5) + 1;
	const month = monthShift < 10 ? monthShift + 3 : monthShift - 9;
	const year = yearOfEra + era * 400 + (month <= 2 ? 1 : 0);
	return [String(year).padStart(4, '0'), pad(month), pad(day)].join('-');
}

/** ISO weekday of a day number: 1 is Monday. */
export function toWeekday(dayNumber: number): Weekday {
	// 1970-01-01 was a Thursday.
	return (((((dayNumber + 3) % 7) + 7) % 7) + 1) as Weekday;
}

/** Shorter way round the clock between two minutes of the day, 0 to 720. */
export function circularMinutes(a: number, b: number): number {
	const apart = Math.abs(a - b) % 1440;
	return Math.min(apart, 1440 - apart);
}

function pad(value: number): string {
	return String(value).padStart(2, '0');
}

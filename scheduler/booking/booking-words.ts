import { toDayNumber, toLocalDate, toWeekday } from './local-date.ts';
import type { Interval, LocalDate, VisitPlan, Weekday } from './types.ts';
import { getZoneClock } from './zone-clock.ts';

/** What the words about a chain need beside its numbers. */
export type DescribeContext = {
	/** The lab's zone; times are told in it. */
	zone: string;
	visits: readonly VisitPlan[];
	/** Names of rigs, rooms and staff by id; an id without a name stands for itself. */
	names: ReadonlyMap<string, string>;
};

const WEEKDAYS = ['Mon', 'Tue', 'Wed', 'Thu', 'Fri', 'Sat', 'Sun'];
const MONTHS = [
	...['January', 'February', 'March', 'April', 'May', 'June', 'July'],
	...['August', 'September', 'October', 'November', 'December']
];

/** 'Day 3', or 'Visit 3' for a visit the plan does not name. */
export function labelOf(visitNumber: number, { visits }: DescribeContext): string {
	return visits.find(({ number }) => number === visitNumber)?.label ?? `Visit ${visitNumber}`;
}

export function nameOf(id: string, { names }: DescribeContext): string {
	return names.get(id) ?? id;
}

export function weekdayName(weekday: Weekday): string {
	return WEEKDAYS[weekday - 1] ?? '';
}

/** 'Thu 25 March'. */
export function formatDate(date: LocalDate): string {
	const [, month = '', day = ''] = date.split('-');
	return `${weekdayName(toWeekday(toDayNumber(date)))} ${Number(day)} ${MONTHS[Number(month) - 1]}`;
}

/** 'Thu 25 March 12:30', in a zone. */
export function formatMoment(instantMs: number, zone: string): string {
	const { dayNumber, minute } = getZoneClock(zone).read(instantMs);
	return `${formatDate(toLocalDate(dayNumber))} ${formatClock(minute)}`;
}

/** '12:30 to 14:00'; the second day is named when there is one. */
export function formatSpan({ fromMs, toMs }: Interval, zone: string): string {
	const clock = getZoneClock(zone);
	const [from, to] = [clock.read(fromMs), clock.read(toMs)];
	const end = from.dayNumber === to.dayNumber ? formatClock(to.minute) : formatMoment(toMs, zone);
	return `${formatClock(from.minute)} to ${end}`;
}

/** '09:05' of a minute of the day. */
export function formatClock(minute: number): string {
	const pad = (value: number) => String(value).padStart(2, '0');
	return `${pad(Math.floor(minute / 60))}:${pad(minute % 60)}`;
}

/** Hours with at most two decimals: '142.5'. */
export function formatHours(hours: number): string {
	return String(Math.round(hours * 100) / 100);
}

/** '45 min', '3 h', '2 h 15 min'. */
export function formatLength(minutes: number): string {
	const hours = Math.floor(minutes / 60);
	const rest = Math.round(minutes - hours * 60);
	if (hours === 0) return `${rest} min`;
	return rest === 0 ? `${hours} h` : `${hours} h ${rest} min`;
}

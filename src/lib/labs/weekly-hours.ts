/** One stretch of open hours on one weekday, in the lab's clock time. Weekday 1 is Monday. */
export type OpenHours = { weekday: number; opensMinute: number; closesMinute: number };

export type HoursFault = { line: number; text: string; reason: HoursReason };
export type HoursReason =
	'no-days' | 'unknown-day' | 'no-time' | 'bad-time' | 'ends-first' | 'overlap';
export type HoursAnswer = { ok: true; hours: OpenHours[] } | { ok: false; faults: HoursFault[] };

const dayNames = ['Mon', 'Tue', 'Wed', 'Thu', 'Fri', 'Sat', 'Sun'];
const dayWords: Record<string, number[]> = {
	daily: [1, 2, 3, 4, 5, 6, 7],
	'every day': [1, 2, 3, 4, 5, 6, 7],
	weekdays: [1, 2, 3, 4, 5],
	weekend: [6, 7],
	weekends: [6, 7]
};
const timePattern = '\\d{1,2}(?:[:.h]\\d{2})?';
const rangePattern = new RegExp(`^(${timePattern})\\s*(?:-|to)\\s*(${timePattern})$`);

/**
 * Reads weekly hours as people write them, one rule a line: days, then one or more stretches.
 *
 * @example parseWeeklyHours('Mon-Fri 09:00-17:00')
 * @example parseWeeklyHours('Mon, Wed 9-12, 13-17\nSat 10:00 to 14:00')
 */
export function parseWeeklyHours(text: string): HoursAnswer {
	const faults: HoursFault[] = [];
	const hours: OpenHours[] = [];
	for (const [index, typed] of text.split('\n').entries()) {
		if (typed.trim() === '') continue;
		const found = parseLine(typed);
		if ('reason' in found) {
			faults.push({ line: index + 1, text: typed.trim(), reason: found.reason });
			continue;
		}
		if (clash(hours, found.hours)) {
			faults.push({ line: index + 1, text: typed.trim(), reason: 'overlap' });
			continue;
		}
		hours.push(...found.hours);
	}
	if (faults.length > 0) return { ok: false, faults };
	return { ok: true, hours: hours.toSorted(byTime) };
}

/** The same hours in the form that `parseWeeklyHours` reads, days with equal hours on one line. */
export function formatWeeklyHours(hours: readonly OpenHours[]): string {
	const stretchesByDay = dayNames.map((_, index) =>
		hours
			.filter((open) => open.weekday === index + 1)
			.toSorted(byTime)
			.map((open) => `${formatMinute(open.opensMinute)}-${formatMinute(open.closesMinute)}`)
			.join(', ')
	);
	const distinct = [...new Set(stretchesByDay)].filter((stretches) => stretches !== '');
	return distinct
		.map((stretches) => {
			const days = stretchesByDay.flatMap((own, index) => (own === stretches ? [index + 1] : []));
			return `${formatDays(days)} ${stretches}`;
		})
		.join('\n');
}

/** Hours a week. */
export function sumHours(hours: readonly OpenHours[]): number {
	return hours.reduce((sum, open) => sum + open.closesMinute - open.opensMinute, 0) / 60;
}

/** What is wrong with a line, and how to mend it. */
export function explainHoursFault({ line, text, reason }: HoursFault): string {
	const how: Record<HoursReason, string> = {
		'no-days': 'has no day. Begin with days, such as Mon-Fri.',
		'unknown-day': 'names a day I do not know. Write Mon, Tue, Wed, Thu, Fri, Sat, Sun.',
		'no-time': 'has no hours. Write such as 09:00-17:00 after the days.',
		'bad-time': 'has a time I cannot read. Write such as 09:00-17:00, on the 24-hour clock.',
		'ends-first': 'closes before it opens.',
		overlap: 'overlaps hours that stand before it.'
	};
	return `Line ${line}, “${text}”, ${how[reason]}`;
}

/** '09:00'; the end of the day is '24:00'. */
export function formatMinute(minute: number): string {
	const two = (value: number) => String(value).padStart(2, '0');
	return `${two(Math.floor(minute / 60))}:${two(minute % 60)}`;
}

type Line = { hours: OpenHours[] } | { reason: HoursReason };

function parseLine(typed: string): Line {
	const line = typed
		.trim()
		.toLowerCase()
		.replace(/[\u2010-\u2015\u2212]/g, '-')
		.replace(/\s+/g, ' ');
	const cut = line.search(/\d/);
	const dayText = (cut < 0 ? line : line.slice(0, cut)).replace(/[:,\s]+$/, '').trim();
	if (dayText === '') return { reason: 'no-days' };
	const days = parseDays(dayText);
	if (!days) return { reason: 'unknown-day' };
	if (cut < 0) return { reason: 'no-time' };
	const stretches = line
		.slice(cut)
		.split(/\s*(?:,|;| and )\s*/)
		.filter(Boolean)
		.map(parseStretch);
	const hours: OpenHours[] = [];
	for (const stretch of stretches) {
		if (stretch === null) return { reason: 'bad-time' };
		if (stretch.closesMinute <= stretch.opensMinute) return { reason: 'ends-first' };
		const found = days.map((weekday) => ({ weekday, ...stretch }));
		if (clash(hours, found)) return { reason: 'overlap' };
		hours.push(...found);
	}
	return { hours };
}

function parseDays(text: string): number[] | null {
	const word = dayWords[text];
	if (word) return word;
	const days = new Set<number>();
	const spans = text.replace(/\s*(?:-| to )\s*/g, '-').replace(/ and |[,;+&]/g, ' ');
	for (const span of spans.split(' ').filter(Boolean)) {
		const [from, to, more] = span.split('-').map(findDay);
		if (!from || more !== undefined || to === 0) return null;
		for (let day = from; ; day = (day % 7) + 1) {
			days.add(day);
			if (day === (to ?? from)) break;
		}
	}
	return days.size > 0 ? [...days].sort((a, b) => a - b) : null;
}

function findDay(text: string): number {
	const full = ['monday', 'tuesday', 'wednesday', 'thursday', 'friday', 'saturday', 'sunday'];
	if (text.length < 2) return 0;
	return full.findIndex((name) => name.startsWith(text.replace(/\.$/, ''))) + 1;
}

function parseStretch(text: string): { opensMinute: number; closesMinute: number } | null {
	const match = rangePattern.exec(text.trim());
	if (!match?.[1] || !match[2]) return null;
	const opensMinute = parseMinute(match[1]);
	const closesMinute = parseMinute(match[2]);
	return opensMinute === null || closesMinute === null ? null : { opensMinute, closesMinute };
}

function parseMinute(text: string): number | null {
	const [hour = 0, minute = 0] = text.split(/[:.h]/).map(Number);
	const total = hour * 60 + minute;
	return minute > 59 || total > 24 * 60 ? null : total;
}

function clash(known: readonly OpenHours[], added: readonly OpenHours[]): boolean {
	return added.some((open) =>
		known.some(
			(other) =>
				other.weekday === open.weekday &&
				other.opensMinute < open.closesMinute &&
				open.opensMinute < other.closesMinute
		)
	);
}

function byTime(a: OpenHours, b: OpenHours): number {
	return a.weekday - b.weekday || a.opensMinute - b.opensMinute;
}

function formatDays(days: readonly number[]): string {
	const runs: number[][] = [];
	for (const day of days) {
		const run = runs.at(-1);
		if (run && run.at(-1) === day - 1) run.push(day);
		else runs.push([day]);
	}
	const name = (day: number | undefined) => dayNames[(day ?? 1) - 1] ?? '';
	return runs
		.flatMap((run) =>
			run.length > 2 ? [`${name(run[0])}-${name(run.at(-1))}`] : run.map((day) => name(day))
		)
		.join(', ');
}

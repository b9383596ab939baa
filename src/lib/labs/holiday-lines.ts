import { numberedLines, type LineFault } from './numbered-lines';

export type Holiday = { on: string; name: string };
export type HolidayAnswer = { ok: true; holidays: Holiday[] } | { ok: false; faults: LineFault[] };

const linePattern =
	/^(\d{4}-\d{2}-\d{2})(?:\s*(?:-|to|\.\.|–)\s*(\d{4}-\d{2}-\d{2}))?[\s,;:]*(.*)$/;
const daysMax = 60;

/**
 * Reads closed days, one line each: a date, or a first and a last one, and what it is.
 *
 * @example parseHolidayLines('2027-04-02 Good Friday\n2027-12-24 to 2028-01-01 Winter break')
 */
export function parseHolidayLines(text: string): HolidayAnswer {
	const faults: LineFault[] = [];
	const names = new Map<string, string>();
	for (const { number, text: line } of numberedLines(text)) {
		const found = parseLine(line);
		if (typeof found === 'string') faults.push({ line: number, message: found });
		else for (const { on, name } of found) names.set(on, name);
	}
	if (faults.length > 0) return { ok: false, faults };
	const holidays = [...names].map(([on, name]) => ({ on, name }));
	return { ok: true, holidays: holidays.toSorted((a, b) => a.on.localeCompare(b.on)) };
}

function parseLine(line: string): Holiday[] | string {
	const match = linePattern.exec(line);
	const first = match?.[1];
	if (!match || !first) {
		return `“${line}” does not begin with a date. Write such as 2027-04-02 Good Friday.`;
	}
	const last = match[2] ?? first;
	const wrong = [first, last].find((date) => !isDate(date));
	if (wrong) return `the calendar has no ${wrong}.`;
	if (last < first) return `${last} comes before ${first}.`;
	const name = match[3]?.trim() || 'Closed';
	if (name.length > 80) return 'the name is longer than 80 characters.';
	const days = datesBetween(first, last);
	if (days.length > daysMax) return `more than ${daysMax} days; write a longer closure in parts.`;
	return days.map((on) => ({ on, name }));
}

/** Whether the calendar has this date ('YYYY-MM-DD'). */
export function isDate(text: string): boolean {
	const atMs = Date.parse(`${text}T00:00:00Z`);
	return !Number.isNaN(atMs) && new Date(atMs).toISOString().slice(0, 10) === text;
}

function datesBetween(first: string, last: string): string[] {
	const dates: string[] = [];
	const endMs = Date.parse(`${last}T00:00:00Z`);
	for (let atMs = Date.parse(`${first}T00:00:00Z`); atMs <= endMs; atMs += 86_400_000) {
		dates.push(new Date(atMs).toISOString().slice(0, 10));
		if (dates.length > daysMax) break;
	}
	return dates;
}

/** A stretch of every such weekday by a person's own clock; weekday 1 is Monday. */
export type WeeklyStretch = { weekday: number; fromMinute: number; toMinute: number };

export type AvailabilityAnswer =
	{ ok: true; windows: WeeklyStretch[] } | { ok: false; message: string };

const dayNames = ['Mon', 'Tue', 'Wed', 'Thu', 'Fri', 'Sat', 'Sun'];
const everyDay = [1, 2, 3, 4, 5, 6, 7];

/** What a word for a part of the day means, in minutes since midnight. */
export const dayParts = {
	mornings: { fromMinute: 6 * 60, toMinute: 13 * 60 },
	afternoons: { fromMinute: 12 * 60, toMinute: 19 * 60 },
	evenings: { fromMinute: 17 * 60, toMinute: 23 * 60 }
};
const example = 'such as mornings, any, or Mon-Wed 09:00-12:30, Fri 14:00-18:00';

/**
 * When a person can come, as typed: any, mornings, afternoons, evenings, or days with hours.
 *
 * No windows mean no limit. Days may be a list or a run (Mon-Wed), hours may leave the minutes out.
 *
 * @example readAvailability('Mon-Tue 9-12') // two windows, 540 to 720
 */
export function readAvailability(typed: string): AvailabilityAnswer {
	const text = typed.trim().toLowerCase().replaceAll(/[–—]/g, '-');
	if (text === '' || /^any( ?time)?$/.test(text)) return { ok: true, windows: [] };
	const windows: WeeklyStretch[] = [];
	let days: number[] = [];
	let daysHaveHours = false;
	for (const token of text.matchAll(tokenPattern)) {
		const found = readToken(token);
		if (typeof found === 'string') return { ok: false, message: `${found}, ${example}` };
		if ('days' in found) {
			days = daysHaveHours ? found.days : [...days, ...found.days];
			daysHaveHours = false;
		} else if ('fromMinute' in found) {
			const wanted = days.length > 0 ? [...new Set(days)] : everyDay;
			windows.push(...wanted.map((weekday) => ({ weekday, ...found })));
			daysHaveHours = true;
		}
	}
	if (days.length > 0 && !daysHaveHours) {
		return { ok: false, message: `the hours are missing, ${example}` };
	}
	return { ok: true, windows: sortWindows(windows) };
}

/** A run of hours, a day or run of days, a separator, or whatever else stands there. */
const tokenPattern =
	/(?<hours>\d{1,2}(?:[:.h]\d{2})?\s*(?:-|to)\s*\d{1,2}(?:[:.h]\d{2})?)|(?<words>[a-z]+(?:\s*-\s*[a-z]+)?)|(?<between>[,;/|+\s]+)|(?<other>\S+)/g;

type Token = { days: number[] } | { fromMinute: number; toMinute: number } | { between: true };

function readToken(match: RegExpMatchArray): Token | string {
	const { hours, words, between, other } = match.groups ?? {};
	if (hours) return readHours(hours);
	if (between || words === 'and') return { between: true };
	if (!words) return `“${other ?? ''}” is no stretch of hours`;
	const part = words.endsWith('s') ? words : `${words}s`;
	if (part in dayParts) return dayParts[part as keyof typeof dayParts];
	const days = readDays(words);
	return days ? { days } : `“${words}” is no weekday`;
}

function readDays(text: string): number[] | null {
	const [from = 0, to = from] = text.split('-').map((name) => dayNumber(name.trim()));
	if (from === 0 || to === 0) return null;
	const days = [from];
	for (let day = from; day !== to;) {
		day = (day % 7) + 1;
		days.push(day);
	}
	return days;
}

function dayNumber(name: string): number {
	const full = ['monday', 'tuesday', 'wednesday', 'thursday', 'friday', 'saturday', 'sunday'];
	return name.length < 2 ? 0 : full.findIndex((day) => day.startsWith(name)) + 1;
}

function readHours(text: string): { fromMinute: number; toMinute: number } | string {
	const [from = '', to = ''] = text.split(/-|to/).map((side) => side.trim());
	const fromMinute = readMinute(from);
	const toMinute = readMinute(to);
	if (Number.isNaN(fromMinute + toMinute)) return `“${text}” is no stretch of hours`;
	return fromMinute < toMinute ? { fromMinute, toMinute } : `“${text}” ends before it begins`;
}

function readMinute(text: string): number {
	const [hour = 0, minute = 0] = text.split(/[:.h]/).map(Number);
	return minute > 59 || hour * 60 + minute > 1440 ? Number.NaN : hour * 60 + minute;
}

function sortWindows(windows: WeeklyStretch[]): WeeklyStretch[] {
	return windows.sort((a, b) => a.weekday - b.weekday || a.fromMinute - b.fromMinute);
}

/**
 * Windows in words that `readAvailability` reads back: 'any', 'mornings', 'Mon-Wed 09:00-12:30'.
 */
export function describeAvailability(windows: readonly WeeklyStretch[]): string {
	if (windows.length === 0) return 'any';
	const daysByHours = new Map<string, number[]>();
	for (const { weekday, fromMinute, toMinute } of windows) {
		const hours = nameHours(fromMinute, toMinute);
		daysByHours.set(hours, [...(daysByHours.get(hours) ?? []), weekday]);
	}
	return [...daysByHours]
		.map(([hours, days]) => (days.length === 7 ? hours : `${nameDays(days)} ${hours}`))
		.join(', ');
}

function nameHours(fromMinute: number, toMinute: number): string {
	const named = Object.entries(dayParts).find(
		([, part]) => part.fromMinute === fromMinute && part.toMinute === toMinute
	);
	return named ? named[0] : `${clockText(fromMinute)}-${clockText(toMinute)}`;
}

function nameDays(days: number[]): string {
	const runs: number[][] = [];
	for (const day of [...days].sort((a, b) => a - b)) {
		const run = runs.at(-1);
		if (run && run.at(-1) === day - 1) run.push(day);
		else runs.push([day]);
	}
	const name = (day: number | undefined) => dayNames[(day ?? 1) - 1] ?? '';
	return runs
		.map((run) => (run.length > 1 ? `${name(run[0])}-${name(run.at(-1))}` : name(run[0])))
		.join(', ');
}

function clockText(minute: number): string {
	return `${String(Math.floor(minute / 60)).padStart(2, '0')}:${String(minute % 60).padStart(2, '0')}`;
}

import type { Desk } from './desk';

/** Moves the demo clock to a time of the lab's clock, such as `2027-03-08T08:00`, by its own page. */
export async function moveClock(desk: Desk, local: string): Promise<void> {
	await desk.open('/demo');
	await desk.fill(/Or to a time/, local);
	await desk.press('Move the clock there');
	await desk.see(`${spoken(local.slice(0, 10))}, ${local.slice(11, 16)}`);
}

/** The Monday after next, far enough ahead that no time zone has reached it. */
export function findMonday(nowMs: number): string {
	const day = new Date(nowMs + 7 * 86_400_000);
	day.setUTCDate(day.getUTCDate() + ((8 - day.getUTCDay()) % 7));
	return day.toISOString().slice(0, 10);
}

/** The date some days after another, both as `2027-03-08`. */
export function addDays(date: string, count: number): string {
	return new Date(Date.parse(date) + count * 86_400_000).toISOString().slice(0, 10);
}

/** `2027-03-08` as pages write it: 'Mon 8 March 2027'. */
export function spoken(date: string): string {
	const day = new Date(`${date}T12:00Z`);
	const part = (options: Intl.DateTimeFormatOptions) =>
		new Intl.DateTimeFormat('en-GB', { timeZone: 'UTC', ...options }).format(day);
	return `${part({ weekday: 'short' })} ${part({ day: 'numeric' })} ${part({ month: 'long' })} ${part({ year: 'numeric' })}`;
}

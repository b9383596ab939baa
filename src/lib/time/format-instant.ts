import { localDateOf, wallClock } from './wall-clock';
import { zoneLabel } from './zone-label';

/** 'Thu 11 March 2027'. */
export function formatDay(instantMs: number, zone: string, locale = 'en'): string {
	return dayText(instantMs, zone, locale, { month: 'long', year: true });
}

/** 'Thu 11 Mar', for tables and captions that name the year elsewhere. */
export function formatShortDay(instantMs: number, zone: string, locale = 'en'): string {
	return dayText(instantMs, zone, locale, { month: 'short', year: false });
}

/** '10:24', always on the 24-hour clock. */
export function formatTime(instantMs: number, zone: string): string {
	return wallClock(instantMs, zone).slice(11, 16);
}

/** 'Thu 11 March 2027, 10:24'. */
export function formatDayTime(instantMs: number, zone: string, locale = 'en'): string {
	return `${formatDay(instantMs, zone, locale)}, ${formatTime(instantMs, zone)}`;
}

/** 'Thu 11 March 2027, 10:24 to 11:54'; both days are named when the range crosses midnight. */
export function formatRange(
	startMs: number,
	endMs: number,
	zone: string,
	locale: string = 'en'
): string {
	const sameDay = localDateOf(startMs, zone) === localDateOf(endMs, zone);
	const end = sameDay ? formatTime(endMs, zone) : formatDayTime(endMs, zone, locale);
	return `${formatDayTime(startMs, zone, locale)} ${isEnglish(locale) ? 'to' : '–'} ${end}`;
}

/** 'Thu 11 March 2027, 10:24 Lisbon (UTC+0)'. */
export function formatWithZone(instantMs: number, zone: string, locale = 'en'): string {
	return `${formatDayTime(instantMs, zone, locale)} ${zoneLabel(instantMs, zone)}`;
}

/**
 * English is put together here, because its order and commas differ between runtimes' language
 * data and the page must read the same on the server and in the browser.
 */
function dayText(
	instantMs: number,
	zone: string,
	locale: string,
	style: { month: 'long' | 'short'; year: boolean }
): string {
	const formatter = new Intl.DateTimeFormat(isEnglish(locale) ? 'en-US' : locale, {
		timeZone: zone,
		weekday: 'short',
		day: 'numeric',
		month: style.month,
		...(style.year ? { year: 'numeric' as const } : {})
	});
	if (!isEnglish(locale)) return formatter.format(instantMs);
	const parts = formatter.formatToParts(instantMs);
	const order = ['weekday', 'day', 'month', 'year'];
	const words = order.map((type) => parts.find((part) => part.type === type)?.value);
	return words.filter((word) => word !== undefined).join(' ');
}

function isEnglish(locale: string): boolean {
	return locale === 'en' || locale.startsWith('en-');
}

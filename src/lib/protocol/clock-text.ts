/** '08:30' as minutes after midnight (24:00 is 1440); null for anything that is no clock time. */
export function readClockText(text: string): number | null {
	const match = /^([01]\d|2[0-4]):([0-5]\d)$/.exec(text.trim());
	if (!match) return null;
	const minute = Number(match[1]) * 60 + Number(match[2]);
	return minute <= 1440 ? minute : null;
}

/** Minutes after midnight as '08:30'. */
export function writeClockText(minute: number): string {
	const two = (value: number) => String(value).padStart(2, '0');
	return `${two(Math.floor(minute / 60))}:${two(minute % 60)}`;
}

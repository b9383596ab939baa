const minuteMs = 60_000;

/** 'in 25 min', 'in 2 h 40 min', 'in 1 d 3 h', or how long ago it was. */
export function describeDelay(ms: number): string {
	const minutes = Math.round(Math.abs(ms) / minuteMs);
	const text = lengthText(minutes);
	if (minutes === 0) return 'now';
	return ms > 0 ? `in ${text}` : `${text} ago`;
}

function lengthText(minutes: number): string {
	const days = Math.floor(minutes / 1440);
	const hours = Math.floor((minutes % 1440) / 60);
	const rest = minutes % 60;
	if (days > 0) return hours > 0 ? `${days} d ${hours} h` : `${days} d`;
	if (hours > 0) return rest > 0 ? `${hours} h ${rest} min` : `${hours} h`;
	return `${rest} min`;
}

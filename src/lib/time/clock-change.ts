import { utcOffsetMinutes } from './wall-clock';

const DAY_MS = 24 * 3_600_000;

export interface ClockChange {
	/** First instant after the change. */
	atMs: number;
	direction: 'forward' | 'back';
}

/**
 * The last change of a zone's clocks between two instants, or undefined when there is none. Changes
 * that undo each other within a day go unseen; none did since 1970.
 *
 * @example
 * findClockChange(Date.UTC(2027, 2, 18), Date.UTC(2027, 3, 1), 'Europe/Lisbon')?.direction // 'forward'
 */
export function findClockChange(
	fromMs: number,
	toMs: number,
	zone: string
): ClockChange | undefined {
	for (let lateMs = toMs; lateMs > fromMs; lateMs -= DAY_MS) {
		const earlyMs = Math.max(fromMs, lateMs - DAY_MS);
		const [before, after] = [utcOffsetMinutes(earlyMs, zone), utcOffsetMinutes(lateMs, zone)];
		if (before === after) continue;
		const direction = after > before ? 'forward' : 'back';
		return { atMs: firstMsWithOffset(earlyMs, lateMs, { offset: after, zone }), direction };
	}
	return undefined;
}

function firstMsWithOffset(
	earlyMs: number,
	lateMs: number,
	{ offset, zone }: { offset: number; zone: string }
): number {
	let [before, after] = [earlyMs, lateMs];
	while (after - before > 1) {
		const middle = Math.floor((before + after) / 2);
		if (utcOffsetMinutes(middle, zone) === offset) after = middle;
		else before = middle;
	}
	return after;
}

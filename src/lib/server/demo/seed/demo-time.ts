import { localToInstants } from '$lib/time/local-to-instants';

export const demoZone = 'Europe/Lisbon';
export const hourMs = 3_600_000;

/** An instant of the demo by its local date and time. */
export function at(date: string, time: string): number {
	const [instant] = localToInstants(`${date}T${time}`, demoZone);
	if (instant === undefined) throw new RangeError(`${date} ${time} does not exist in ${demoZone}`);
	return instant;
}

/** Wednesday morning, the tenth day of visits: when the demo opens. */
export const demoNowMs = at('2027-03-10', '10:24');

/** A clock that the seed sets. */
export function createSetClock(startMs: number) {
	let nowMs = startMs;
	return {
		now: () => nowMs,
		set(ms: number) {
			nowMs = Math.max(nowMs, ms);
		}
	};
}
export type SetClock = ReturnType<typeof createSetClock>;

import { localToInstants } from '$lib/time/local-to-instants';
import { wallClock } from '$lib/time/wall-clock';

/**
 * The week's grid shows the clock on the lab's wall. Its library knows no named zones, so it is
 * given local times as if they were UTC, and what it gives back is read the same way.
 */
export function toGridTime(instantMs: number, zone: string): string {
	return `${wallClock(instantMs, zone)}Z`;
}

/** The instant of a place on the grid; null where the clocks jump over that local time. */
export function fromGridTime(gridTime: Date, zone: string): number | null {
	const local = gridTime.toISOString().slice(0, 19);
	return localToInstants(local, zone)[0] ?? null;
}

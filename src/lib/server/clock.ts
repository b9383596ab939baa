/** Where "now" comes from: the system's clock, or the demo clock that can be moved forward. */
export type Clock = {
	/** The present instant in epoch milliseconds. */
	now(): number;
};

/** The system's clock moved by a fixed number of milliseconds (0 outside demo mode). */
export function createClock(offsetMs: number): Clock {
	return { now: () => Date.now() + offsetMs };
}

/** The system's own clock, for what browsers time themselves: sessions and sign-in links. */
export const systemClock: Clock = createClock(0);

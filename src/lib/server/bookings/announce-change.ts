import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';

/** What happened to bookings, as far as the participant must hear of it. */
export type PlanChange =
	| { kind: 'booked'; bookingIds: readonly string[] }
	| { kind: 'moved'; bookingId: string; oldTime: { startMs: number; endMs: number } }
	| { kind: 'cancelled'; bookingId: string }
	| { kind: 'withdrawn'; participantId: string };

/**
 * Orders the mails that a change calls for, in the caller's transaction; answers how many.
 */
export async function announceChange(
	_tx: Queryable,
	_clock: Clock,
	_change: PlanChange
): Promise<number> {
	return 0;
}

import { eq } from 'drizzle-orm';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Database } from '$lib/server/db/client';
import { booking } from '$lib/server/db/schema';
import { actorOf, recordEvent } from '$lib/server/record/record-event';
import { loadVisits, type StudyVisit } from './load-visits';

export type SettleOutcome = { ok: true } | { ok: false; reason: 'not-found' | 'no-request' };

/**
 * Leaves a visit where it is although the person declined it or asked for another time, because it
 * was talked over. Moving or cancelling the visit settles the request by itself.
 */
export async function settleRequest(
	db: Database,
	clock: Clock,
	grant: Grant<'booking:change'>,
	{ bookingId }: { bookingId: string }
): Promise<SettleOutcome> {
	return db.transaction(async (tx) => {
		const [visit] = await loadVisits(tx, grant, { bookingIds: [bookingId] });
		if (!visit) return { ok: false, reason: 'not-found' };
		if (!hasOpenRequest(visit)) return { ok: false, reason: 'no-request' };
		await tx
			.update(booking)
			.set({ requestSettledAt: new Date(clock.now()) })
			.where(eq(booking.id, bookingId));
		await recordEvent(tx, clock, actorOf(grant), {
			kind: 'request-settled',
			item: 'booking',
			labId: grant.labId,
			studyId: grant.studyId,
			participantId: visit.participantId,
			body: { visitNumber: visit.visitNumber, answer: visit.answer, kept: true }
		});
		return { ok: true };
	});
}

/** Whether the person declined, or asked for another time, and nobody has dealt with it since. */
export function hasOpenRequest(visit: StudyVisit): boolean {
	if (visit.state !== 'booked' || visit.answeredAtMs === null) return false;
	if (visit.answer !== 'declined' && visit.answer !== 'asks-other-time') return false;
	return visit.requestSettledAtMs === null || visit.requestSettledAtMs < visit.answeredAtMs;
}

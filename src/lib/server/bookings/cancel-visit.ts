import { and, eq } from 'drizzle-orm';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Database, Transaction } from '$lib/server/db/client';
import { revokeBundlesOfVisit } from '$lib/server/bundles/revoke-bundles';
import { booking } from '$lib/server/db/schema';
import { actorOf, recordEvent } from '$lib/server/record/record-event';
import { announceChange } from './announce-change';
import type { MailSetting } from '$lib/server/invitations/mail-setting';
import { loadVisits, type StudyVisit } from './load-visits';
import { countPlanChangeAnyway, lockLab } from './lock-plan';

export type CancelOutcome =
	{ ok: true; mailCount: number } | { ok: false; reason: 'not-found' | 'not-booked' | 'over' };

/** Cancels a visit to come: its place is free again, and who was invited is told once. */
export async function cancelVisit(
	db: Database,
	clock: Clock,
	grant: Grant<'booking:change'>,
	{ bookingId, mail }: { bookingId: string; mail: MailSetting }
): Promise<CancelOutcome> {
	return db.transaction(async (tx) => {
		await lockLab(tx, grant.labId);
		const [visit] = await loadVisits(tx, grant, { bookingIds: [bookingId] });
		if (!visit) return { ok: false, reason: 'not-found' };
		if (visit.state !== 'booked') return { ok: false, reason: 'not-booked' };
		if (visit.startMs <= clock.now()) return { ok: false, reason: 'over' };
		await countPlanChangeAnyway(tx, grant.studyId);
		await markCancelled(tx, clock, visit);
		const mailCount = await announceChange(tx, clock, mail, { kind: 'cancelled', bookingId });
		await recordEvent(tx, clock, actorOf(grant), {
			kind: 'visit-cancelled',
			item: 'booking',
			labId: grant.labId,
			studyId: grant.studyId,
			participantId: visit.participantId,
			body: { visitNumber: visit.visitNumber, startAt: new Date(visit.startMs).toISOString() }
		});
		return { ok: true, mailCount };
	});
}

/** Frees a visit's place, and makes the files for it worthless. */
export async function markCancelled(
	tx: Transaction,
	clock: Clock,
	visit: StudyVisit
): Promise<void> {
	const at = new Date(clock.now());
	await revokeBundlesOfVisit(tx, at, visit);
	await tx
		.update(booking)
		.set({ state: 'cancelled', changedAt: at })
		.where(and(eq(booking.id, visit.bookingId), eq(booking.state, 'booked')));
}

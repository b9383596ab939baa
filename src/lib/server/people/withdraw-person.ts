import { and, eq, isNull } from 'drizzle-orm';
import type { Grant } from '$lib/server/access/require-permission';
import { announceChange } from '$lib/server/bookings/announce-change';
import type { MailSetting } from '$lib/server/invitations/mail-setting';
import { markCancelled } from '$lib/server/bookings/cancel-visit';
import { loadVisits } from '$lib/server/bookings/load-visits';
import { countPlanChangeAnyway, lockLab } from '$lib/server/bookings/lock-plan';
import { revokeBundles } from '$lib/server/bundles/revoke-bundles';
import type { Clock } from '$lib/server/clock';
import type { Database } from '$lib/server/db/client';
import { participant } from '$lib/server/db/schema';
import { actorOf, recordEvent } from '$lib/server/record/record-event';

export type WithdrawOutcome =
	| { ok: true; cancelledCount: number; mailCount: number }
	| { ok: false; reason: 'not-found' | 'withdrawn-already' };

/**
 * Ends a person's part in the study at once: bookings to come are cancelled, bundles
 * revoked, waiting mails stopped, one mail confirms it. What was collected before is kept.
 */
export async function withdrawPerson(
	db: Database,
	clock: Clock,
	grant: Grant<'participant:withdraw'>,
	{ participantId, mail }: { participantId: string; mail: MailSetting }
): Promise<WithdrawOutcome> {
	return db.transaction(async (tx) => {
		await lockLab(tx, grant.labId);
		const now = new Date(clock.now());
		const [gone] = await tx
			.update(participant)
			.set({ state: 'withdrawn', withdrawnAt: now, withdrawnBy: grant.personId })
			.where(
				and(
					eq(participant.id, participantId),
					eq(participant.studyId, grant.studyId),
					isNull(participant.withdrawnAt)
				)
			)
			.returning({ id: participant.id });
		if (!gone) return { ok: false, reason: await findReason(tx, grant, participantId) };
		await countPlanChangeAnyway(tx, grant.studyId);
		const visits = await loadVisits(tx, grant, { participantId });
		const coming = visits.filter(({ state, endMs }) => state === 'booked' && endMs > clock.now());
		await revokeBundles(tx, now, { studyId: grant.studyId, participantId });
		for (const visit of coming) await markCancelled(tx, clock, visit);
		const cancelledBookingIds = coming.map(({ bookingId }) => bookingId);
		const change = { kind: 'withdrawn', participantId, cancelledBookingIds } as const;
		const mailCount = await announceChange(tx, clock, mail, change);
		await recordEvent(tx, clock, actorOf(grant), {
			kind: 'person-withdrawn',
			item: 'participant-state',
			labId: grant.labId,
			studyId: grant.studyId,
			participantId,
			body: { cancelledVisits: coming.map(({ visitNumber }) => visitNumber) }
		});
		return { ok: true, cancelledCount: coming.length, mailCount };
	});
}

async function findReason(
	tx: Parameters<typeof loadVisits>[0],
	grant: Grant,
	participantId: string
): Promise<'not-found' | 'withdrawn-already'> {
	const [found] = await tx
		.select({ id: participant.id })
		.from(participant)
		.where(and(eq(participant.id, participantId), eq(participant.studyId, grant.studyId)));
	return found ? 'withdrawn-already' : 'not-found';
}

import type { Clock } from '$lib/server/clock';
import type { Transaction } from '$lib/server/db/client';
import { enqueueInvitations } from '$lib/server/invitations/enqueue-invitations';
import { enqueueCancellation, enqueueMove } from '$lib/server/invitations/enqueue-visit-change';
import { enqueueWithdrawal } from '$lib/server/invitations/enqueue-withdrawal';
import type { MailSetting } from '$lib/server/invitations/mail-setting';

/** What happened to bookings, as far as the participant must hear of it. */
export type PlanChange =
	| { kind: 'booked'; participantId: string }
	| { kind: 'moved'; bookingId: string }
	| { kind: 'cancelled'; bookingId: string }
	| { kind: 'withdrawn'; participantId: string; cancelledBookingIds: string[] };

/**
 * Orders the mails that a change calls for, in the caller's transaction and after the bookings hold
 * what is new; answers how many. Nothing is written to a person whose contact data was erased.
 */
export async function announceChange(
	tx: Transaction,
	clock: Clock,
	setting: MailSetting,
	change: PlanChange
): Promise<number> {
	if (change.kind === 'booked') {
		const queued = await enqueueInvitations(tx, clock, setting, change.participantId);
		return queued.ok ? queued.queuedCount : 0;
	}
	const queued = await enqueue(tx, clock, setting, change);
	return queued.ok && queued.queued !== 'nothing' ? 1 : 0;
}

function enqueue(
	tx: Transaction,
	clock: Clock,
	setting: MailSetting,
	change: Exclude<PlanChange, { kind: 'booked' }>
) {
	if (change.kind === 'moved') return enqueueMove(tx, clock, setting, change.bookingId);
	if (change.kind === 'cancelled') {
		return enqueueCancellation(tx, clock, setting, change.bookingId);
	}
	return enqueueWithdrawal(tx, clock, setting, change);
}

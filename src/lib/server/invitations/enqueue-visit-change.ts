import { and, asc, eq, inArray } from 'drizzle-orm';
import type { Clock } from '$lib/server/clock';
import type { Transaction } from '$lib/server/db/client';
import { booking, outbox } from '$lib/server/db/schema';
import { loadVisit, type VisitToTell } from './load-visit';
import type { MailSetting } from './mail-setting';
import type { ToldVisit } from './sealed-mail';
import { loadThread, nextStampMs, supersede } from './visit-thread';
import { writeVisitRow } from './write-visit-row';

export type Enqueued =
	| { ok: true; queued: 'invitation' | 'moved' | 'cancelled' | 'nothing' }
	| { ok: false; reason: 'erased' };

/**
 * Tells the participant that a visit has another time or place, in the transaction that changed the
 * booking. Call it after the booking's row holds the new ones.
 *
 * A visit nobody was invited to sends nothing. An invitation that has not left is replaced and
 * keeps its hour. An answer given for the old time is cleared.
 */
export async function enqueueMove(
	tx: Transaction,
	clock: Clock,
	setting: MailSetting,
	bookingId: string
): Promise<Enqueued> {
	const found = await loadVisit(tx, setting, bookingId);
	if (!found.ok) return found;
	const { visit } = found;
	if (visit.booking.invitedAt === null) return { ok: true, queued: 'nothing' };
	const thread = await loadThread(tx, setting, visit);
	if (isSame(thread.latest, visit.told)) return { ok: true, queued: 'nothing' };
	const sequence = await raiseSequence(tx, visit);
	await supersede(tx, thread.unsent);
	const isNews = thread.known !== null && !isSame(thread.known, visit.told);
	const kind = isNews ? 'moved' : 'invitation';
	await writeVisitRow(tx, setting, visit, {
		kind,
		sequence,
		previous: thread.known,
		inReplyTo: thread.firstMessageId,
		stampMs: nextStampMs(thread, clock.now()),
		dueMs: Math.max(clock.now(), ...thread.unsent.map((row) => row.dueAt.getTime()))
	});
	return { ok: true, queued: kind };
}

/**
 * Tells the participant that a visit does not take place, in the transaction that cancelled it. A
 * visit of which nothing was ever sent sends nothing, and what waits is never sent.
 */
export async function enqueueCancellation(
	tx: Transaction,
	clock: Clock,
	setting: MailSetting,
	bookingId: string
): Promise<Enqueued> {
	const found = await loadVisit(tx, setting, bookingId);
	if (!found.ok) return found;
	const { visit } = found;
	const thread = await loadThread(tx, setting, visit);
	await supersede(tx, thread.unsent);
	const isOver = visit.told.endMs <= clock.now();
	if (thread.known === null || isOver) return { ok: true, queued: 'nothing' };
	await writeVisitRow(tx, setting, visit, {
		kind: 'cancelled',
		sequence: await raiseSequence(tx, visit),
		previous: thread.known,
		inReplyTo: thread.firstMessageId,
		stampMs: nextStampMs(thread, clock.now()),
		dueMs: clock.now()
	});
	return { ok: true, queued: 'cancelled' };
}

/**
 * Writes anew what could not be sent to a participant, once their address is mended; in the
 * transaction that mends it.
 */
export async function renewFailedMail(
	tx: Transaction,
	clock: Clock,
	setting: MailSetting,
	participantId: string
): Promise<void> {
	const failed = tx
		.select({ id: outbox.bookingId })
		.from(outbox)
		.where(and(eq(outbox.participantId, participantId), eq(outbox.state, 'failed')));
	const rows = await tx
		.select({ id: booking.id })
		.from(booking)
		.where(and(eq(booking.state, 'booked'), inArray(booking.id, failed)))
		.orderBy(asc(booking.visitNumber));
	for (const { id } of rows) await enqueueMove(tx, clock, setting, id);
}

async function raiseSequence(tx: Transaction, { booking: row }: VisitToTell): Promise<number> {
	const sequence = row.sequence + 1;
	await tx
		.update(booking)
		.set({ sequence, answer: 'none', answeredAt: null, answerNote: null, requestSettledAt: null })
		.where(eq(booking.id, row.id));
	return sequence;
}

function isSame(a: ToldVisit | null, b: ToldVisit): boolean {
	return a?.startMs === b.startMs && a.endMs === b.endMs && a.place === b.place;
}

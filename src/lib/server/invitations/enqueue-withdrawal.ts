import { asc, inArray } from 'drizzle-orm';
import type { Clock } from '$lib/server/clock';
import type { Transaction } from '$lib/server/db/client';
import { booking, outbox } from '$lib/server/db/schema';
import { buildMailMessage, domainOf } from '$lib/server/mail/mail-message';
import { renderMailHtml } from '$lib/server/mail/render-mail-html';
import { renderMailText } from '$lib/server/mail/render-mail-text';
import { enqueueCancellation, type Enqueued } from './enqueue-visit-change';
import { loadRecipient, type Recipient } from './load-recipient';
import type { MailSetting } from './mail-setting';
import { sealMail } from './sealed-mail';
import { writeWithdrawalMail, type WithdrawalMailFacts } from './withdrawal-mail';

/**
 * Confirms a withdrawal, and takes the visits it cancelled out of the participant's calendar; in
 * the transaction that withdrew them. Whatever else waits for this person is never sent.
 *
 * @param options.cancelledBookingIds the bookings that this withdrawal cancelled
 */
export async function enqueueWithdrawal(
	tx: Transaction,
	clock: Clock,
	setting: MailSetting,
	options: { participantId: string; cancelledBookingIds: string[] }
): Promise<Enqueued> {
	const found = await loadRecipient(tx, setting, options.participantId);
	if (!found.ok) return found;
	const told: string[] = [];
	for (const bookingId of options.cancelledBookingIds) {
		const queued = await enqueueCancellation(tx, clock, setting, bookingId);
		if (queued.ok && queued.queued === 'cancelled') told.push(bookingId);
	}
	const visits = await loadVisits(tx, told);
	await writeConfirmation(tx, clock, setting, { recipient: found.recipient, visits });
	return { ok: true, queued: 'cancelled' };
}

async function loadVisits(
	tx: Transaction,
	bookingIds: string[]
): Promise<WithdrawalMailFacts['cancelledVisits']> {
	if (bookingIds.length === 0) return [];
	const rows = await tx
		.select({ visitNumber: booking.visitNumber, during: booking.during })
		.from(booking)
		.where(inArray(booking.id, bookingIds))
		.orderBy(asc(booking.visitNumber));
	return rows.map(({ visitNumber, during }) => ({
		visitNumber,
		startMs: during.startsAt.getTime(),
		endMs: during.endsAt.getTime()
	}));
}

async function writeConfirmation(
	tx: Transaction,
	clock: Clock,
	setting: MailSetting,
	{ recipient, visits }: { recipient: Recipient; visits: WithdrawalMailFacts['cancelledVisits'] }
): Promise<void> {
	const { participantId, studyId, name, email, lab, language, publicTitle, zone } = recipient;
	const participant = { name, zone };
	const text = writeWithdrawalMail({
		language,
		publicTitle,
		participant,
		lab,
		cancelledVisits: visits
	});
	const mail = await buildMailMessage({
		from: { name: lab.name, email: setting.fromAddress },
		to: { name, email },
		messageId: `<${participantId}.withdrawn@${domainOf(setting.fromAddress)}>`,
		sentAtMs: clock.now(),
		subject: text.subject,
		text: renderMailText(text.content),
		html: renderMailHtml(text.content),
		language: text.content.language
	});
	await tx.insert(outbox).values({
		studyId,
		participantId,
		kind: 'withdrawn',
		sequence: 0,
		messageId: mail.messageId,
		sealed: await sealMail(setting.keys, participantId, { ...mail, told: null }),
		dueAt: new Date(clock.now()),
		createdAt: new Date(clock.now())
	});
}

import { eq } from 'drizzle-orm';
import type { AnswerInput } from '$lib/answers/answer-schema';
import type { AnswerLink } from '$lib/server/access/require-answer-link';
import type { Clock } from '$lib/server/clock';
import type { Database, Transaction } from '$lib/server/db/client';
import { booking, participant } from '$lib/server/db/schema';
import type { MailSetting } from '$lib/server/invitations/mail-setting';
import { recordEvent } from '$lib/server/record/record-event';
import { visitStateOf, type VisitState } from './visit-state';

export type AnswerOutcome = { ok: true } | { ok: false; reason: Exclude<VisitState, 'open'> };

/**
 * Writes down a participant's answer to a visit. A later answer replaces an earlier one; one given
 * by the link of an older mail is refused, as it was for another time.
 */
export async function answerVisit(
	db: Database,
	clock: Clock,
	setting: MailSetting,
	{ link, answer, note }: AnswerInput & { link: AnswerLink }
): Promise<AnswerOutcome> {
	return db.transaction(async (tx): Promise<AnswerOutcome> => {
		const rows = await lockVisit(tx, link);
		const state = visitStateOf(rows, link, clock.now());
		if (state !== 'open') return { ok: false, reason: state };
		await writeAnswer(tx, clock, setting, {
			bookingId: link.bookingId,
			participantId: link.participantId,
			answer,
			note
		});
		await recordEvent(
			tx,
			clock,
			{ kind: 'participant' },
			{
				kind: 'visit-answered',
				item: 'booking',
				studyId: link.studyId,
				participantId: link.participantId,
				body: { visitNumber: rows.booking.visitNumber, answer, hasNote: note !== '' }
			}
		);
		return { ok: true };
	});
}

/** Puts an answer on a booking; one that asks for something opens a request again. */
export async function writeAnswer(
	tx: Transaction,
	clock: Clock,
	setting: MailSetting,
	given: AnswerInput & { bookingId: string; participantId: string }
): Promise<void> {
	const { bookingId, participantId, answer, note } = given;
	const answerNote = note === '' ? null : await setting.keys.encrypt(participantId, note);
	const answeredAt = new Date(clock.now());
	await tx
		.update(booking)
		.set({ answer, answeredAt, answerNote, requestSettledAt: null })
		.where(eq(booking.id, bookingId));
}

async function lockVisit(tx: Transaction, link: AnswerLink) {
	const [row] = await tx
		.select({ booking, participant })
		.from(booking)
		.innerJoin(participant, eq(participant.id, booking.participantId))
		.where(eq(booking.id, link.bookingId))
		.for('update', { of: booking });
	if (!row) throw new RangeError('A link stands for a booking that exists');
	return row;
}

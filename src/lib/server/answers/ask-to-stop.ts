import { and, asc, eq, sql } from 'drizzle-orm';
import type { AnswerLink } from '$lib/server/access/require-answer-link';
import type { Clock } from '$lib/server/clock';
import type { Database, Transaction } from '$lib/server/db/client';
import { booking, participant } from '$lib/server/db/schema';
import type { MailSetting } from '$lib/server/invitations/mail-setting';
import { pauseParticipant } from '$lib/server/pauses/pause-study';
import { writeAnswer } from './answer-visit';

/** What stands in the request that the coordinator sees. */
export const STOP_NOTE = 'I want to stop taking part.';

export type StopOutcome = { ok: true } | { ok: false; reason: 'stopped' };

/**
 * A participant stops taking part: everything for them pauses at once, by their own act and without
 * a reason. The coordinator finds a request at their next visit and completes the withdrawal.
 *
 * Works with every link they ever got. A second time changes nothing.
 */
export async function askToStop(
	db: Database,
	clock: Clock,
	setting: MailSetting,
	link: AnswerLink
): Promise<StopOutcome> {
	return db.transaction(async (tx): Promise<StopOutcome> => {
		const [person] = await tx
			.select({ withdrawnAt: participant.withdrawnAt })
			.from(participant)
			.where(eq(participant.id, link.participantId))
			.for('update');
		if (!person || person.withdrawnAt !== null) return { ok: false, reason: 'stopped' };
		const bookingId = await findNextVisit(tx, clock, link);
		if (bookingId) {
			const { participantId } = link;
			const given = { bookingId, participantId, answer: 'declined', note: STOP_NOTE } as const;
			await writeAnswer(tx, clock, setting, given);
		}
		await pauseParticipant(
			tx,
			clock,
			{ kind: 'participant' },
			{
				studyId: link.studyId,
				participantId: link.participantId,
				reason: 'The participant asked to stop taking part.'
			}
		);
		return { ok: true };
	});
}

async function findNextVisit(
	tx: Transaction,
	clock: Clock,
	link: AnswerLink
): Promise<string | null> {
	const now = new Date(clock.now()).toISOString();
	const [next] = await tx
		.select({ id: booking.id })
		.from(booking)
		.where(
			and(
				eq(booking.participantId, link.participantId),
				eq(booking.state, 'booked'),
				sql`upper(${booking.during}) > ${now}::timestamptz`
			)
		)
		.orderBy(asc(sql`lower(${booking.during})`))
		.limit(1);
	return next?.id ?? null;
}

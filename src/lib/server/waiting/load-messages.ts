import { and, desc, eq, inArray } from 'drizzle-orm';
import type { Grant } from '$lib/server/access/require-permission';
import type { Queryable } from '$lib/server/db/client';
import { booking, outbox, participant } from '$lib/server/db/schema';

/** A mail as those who invite see it: to which code, about which visit, what became of it. */
export type Message = {
	id: string;
	participantId: string | null;
	code: string;
	kind: 'invitation' | 'moved' | 'cancelled' | 'withdrawn';
	visitNumber: number | null;
	visitStartMs: number | null;
	state: 'waiting' | 'sent' | 'superseded' | 'failed' | 'unknown';
	dueAtMs: number;
	sentAtMs: number | null;
	attempts: number;
	lastError: string | null;
};

type States = readonly Message['state'][];

/** Mails of the study, newest first; never their text, never an address. */
export async function loadMessages(
	db: Queryable,
	grant: Grant<'message:read' | 'today:read' | 'participant:list'>,
	{
		states,
		participantId,
		limit = 500
	}: { states?: States; participantId?: string; limit?: number } = {}
): Promise<Message[]> {
	const rows = await db
		.select({
			id: outbox.id,
			participantId: outbox.participantId,
			code: participant.code,
			kind: outbox.kind,
			visitNumber: booking.visitNumber,
			during: booking.during,
			state: outbox.state,
			dueAt: outbox.dueAt,
			sentAt: outbox.sentAt,
			attempts: outbox.attempts,
			lastError: outbox.lastError
		})
		.from(outbox)
		.innerJoin(participant, eq(participant.id, outbox.participantId))
		.leftJoin(booking, eq(booking.id, outbox.bookingId))
		.where(
			and(
				eq(outbox.studyId, grant.studyId),
				states ? inArray(outbox.state, [...states]) : undefined,
				participantId ? eq(outbox.participantId, participantId) : undefined
			)
		)
		.orderBy(desc(outbox.dueAt), desc(outbox.createdAt), outbox.id)
		.limit(limit);
	return rows.map(({ during, dueAt, sentAt, ...row }) => ({
		...row,
		visitStartMs: during?.startsAt.getTime() ?? null,
		dueAtMs: dueAt.getTime(),
		sentAtMs: sentAt?.getTime() ?? null
	}));
}

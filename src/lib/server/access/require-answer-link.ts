import { error } from '@sveltejs/kit';
import { eq } from 'drizzle-orm';
import type { Database } from '$lib/server/db/client';
import { answerLink, booking } from '$lib/server/db/schema';
import { mayTry } from '$lib/server/http/limit-rate';
import { hashLinkToken } from '$lib/server/mail/mail-link';

declare const held: unique symbol;

/**
 * Proof that somebody holds the link of one mail about one visit, and the scope of every query made
 * for them: the participant's own, nothing else of the study.
 */
export type AnswerLink = {
	readonly [held]: true;
	readonly bookingId: string;
	readonly studyId: string;
	readonly participantId: string;
	/** The SEQUENCE of the mail that held the link. */
	readonly sequence: number;
};

type Visit = { locals: { db: Database }; params: { token?: string }; getClientAddress(): string };

/**
 * The first line of a participant's page: whoever has the link may see and answer this visit. Wrong
 * links are 404, and 429 when one place tries many.
 */
export async function requireAnswerLink(event: Visit): Promise<AnswerLink> {
	const link = await findAnswerLink(event.locals.db, event.params.token ?? '');
	if (link) return link;
	if (await mayTry('token', event.getClientAddress())) error(404, 'Not found');
	error(429, 'Too many wrong links');
}

/** The link a token stands for, or null when there is none. */
export async function findAnswerLink(db: Database, token: string): Promise<AnswerLink | null> {
	const tokenHash = hashLinkToken(token);
	if (!tokenHash) return null;
	const [row] = await db
		.select({
			bookingId: answerLink.bookingId,
			sequence: answerLink.sequence,
			studyId: booking.studyId,
			participantId: booking.participantId
		})
		.from(answerLink)
		.innerJoin(booking, eq(booking.id, answerLink.bookingId))
		.where(eq(answerLink.tokenHash, tokenHash));
	return (row ?? null) as AnswerLink | null;
}

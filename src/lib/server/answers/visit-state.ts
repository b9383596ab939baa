import type { AnswerLink } from '$lib/server/access/require-answer-link';
import type { booking, participant } from '$lib/server/db/schema';

/**
 * How a visit stands for whoever opens a link to it.
 * - open: it can be answered.
 * - moved: the link is of an older mail; a newer one holds the new time and its own link.
 * - begun: too late to answer.
 */
export type VisitState = 'open' | 'moved' | 'cancelled' | 'begun' | 'stopped';

type Rows = {
	booking: Pick<typeof booking.$inferSelect, 'state' | 'sequence' | 'during'>;
	participant: Pick<typeof participant.$inferSelect, 'withdrawnAt'>;
};

export function visitStateOf(rows: Rows, link: AnswerLink, nowMs: number): VisitState {
	if (rows.participant.withdrawnAt !== null) return 'stopped';
	if (rows.booking.state === 'cancelled') return 'cancelled';
	if (rows.booking.sequence !== link.sequence) return 'moved';
	if (rows.booking.state !== 'booked') return 'begun';
	return rows.booking.during.startsAt.getTime() <= nowMs ? 'begun' : 'open';
}

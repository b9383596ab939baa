import { and, eq, inArray, isNull } from 'drizzle-orm';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Database } from '$lib/server/db/client';
import { booking, bundle, decision } from '$lib/server/db/schema';
import { isPaused } from '$lib/server/pauses/is-paused';
import { insideVisitReadyMs } from './load-visit-board';

export type BlockFile = { fileName: string; content: Uint8Array };

/** The file of a ready block for its rig; null while it is not ready, paused, or not of this study. */
export async function loadBlockFile(
	db: Database,
	clock: Clock,
	grant: Grant<'bundle:fetch'>,
	place: { bookingId: string; blockNumber: number }
): Promise<BlockFile | null> {
	const [row] = await db
		.select({
			participantId: booking.participantId,
			fileName: bundle.fileName,
			content: bundle.content,
			readyAt: decision.readyAt,
			expiresAt: bundle.expiresAt
		})
		.from(booking)
		.innerJoin(
			decision,
			and(
				eq(decision.participantId, booking.participantId),
				eq(decision.visitNumber, booking.visitNumber),
				eq(decision.blockNumber, place.blockNumber)
			)
		)
		.innerJoin(bundle, and(eq(bundle.decisionId, decision.id), isNull(bundle.revokedAt)))
		.where(
			and(
				eq(booking.id, place.bookingId),
				eq(booking.studyId, grant.studyId),
				inArray(booking.state, ['booked', 'attended'])
			)
		);
	if (!row?.readyAt || clock.now() < row.readyAt.getTime() + insideVisitReadyMs) return null;
	if (row.expiresAt.getTime() <= clock.now()) return null;
	if (await db.transaction((tx) => isPaused(tx, grant.studyId, row.participantId))) return null;
	return { fileName: row.fileName, content: row.content };
}

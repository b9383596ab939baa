import { and, asc, eq, lte } from 'drizzle-orm';
import type { Clock } from '$lib/server/clock';
import type { Database } from '$lib/server/db/client';
import { decision, participant } from '$lib/server/db/schema';
import { applyFallback } from './settle-decision';

/** Gives every held decision whose ready hour has come the protocol's fallback. */
export async function applyDueFallbacks(db: Database, clock: Clock): Promise<number> {
	const due = await db
		.select({ decisionId: decision.id, studyId: decision.studyId })
		.from(decision)
		.innerJoin(participant, eq(participant.id, decision.participantId))
		.where(and(eq(decision.state, 'held'), lte(decision.readyAt, new Date(clock.now()))))
		.orderBy(asc(decision.readyAt), asc(participant.number));
	let count = 0;
	for (const { decisionId, studyId } of due) {
		const reason = 'Nobody settled it by the ready hour.';
		if (await db.transaction((tx) => applyFallback(tx, clock, { decisionId, studyId, reason }))) {
			count += 1;
		}
	}
	return count;
}

import { and, eq, isNull, or, sql } from 'drizzle-orm';
import type { Queryable } from '$lib/server/db/client';
import { studyPause } from '$lib/server/db/schema';

/**
 * Whether the study, or this participant in it, is paused now.
 *
 * Asked inside a transaction that issues something (block, booking, mail), it also keeps a pause
 * from slipping in before that transaction ends: whoever pauses waits for it, then revokes what it
 * issued. Ask before `recordEvent`.
 */
export async function isPaused(
	db: Queryable,
	studyId: string,
	participantId?: string
): Promise<boolean> {
	await db.execute(sql`select pg_advisory_xact_lock_shared(${pauseLockKey(studyId)})`);
	const ofStudy = isNull(studyPause.participantId);
	const [found] = await db
		.select({ id: studyPause.id })
		.from(studyPause)
		.where(
			and(
				eq(studyPause.studyId, studyId),
				isNull(studyPause.liftedAt),
				participantId ? or(ofStudy, eq(studyPause.participantId, participantId)) : ofStudy
			)
		)
		.limit(1);
	return found !== undefined;
}

/** The lock that orders pausing against issuing, one per study. */
export function pauseLockKey(studyId: string) {
	return sql`hashtext(${`study-pause:${studyId}`})`;
}

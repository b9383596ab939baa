import { eq } from 'drizzle-orm';
import type { Queryable } from '$lib/server/db/client';
import { participant } from '$lib/server/db/schema';

/** Every code of a study, given by hand or by number. */
export async function findTakenCodes(db: Queryable, studyId: string): Promise<Set<string>> {
	const rows = await db
		.select({ code: participant.code })
		.from(participant)
		.where(eq(participant.studyId, studyId));
	return new Set(rows.map(({ code }) => code));
}

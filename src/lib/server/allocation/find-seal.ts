import { and, eq } from 'drizzle-orm';
import type { Queryable } from '$lib/server/db/client';
import { allocationSeal } from '$lib/server/db/schema';

/** The seal of one version; null while there is none. */
export async function findSeal(db: Queryable, studyId: string, protocolHash: string) {
	const [seal] = await db
		.select()
		.from(allocationSeal)
		.where(and(eq(allocationSeal.studyId, studyId), eq(allocationSeal.protocolHash, protocolHash)));
	return seal ?? null;
}

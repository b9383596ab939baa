import { eq } from 'drizzle-orm';
import type { Queryable } from '$lib/server/db/client';
import { allocation } from '$lib/server/db/schema';

/**
 * The arm of one participant, null before allocation. For the decision worker and for roles that
 * see arms: never call it in a blinded role's request.
 */
export async function findArm(db: Queryable, participantId: string): Promise<string | null> {
	const [row] = await db
		.select({ arm: allocation.arm })
		.from(allocation)
		.where(eq(allocation.participantId, participantId));
	return row?.arm ?? null;
}

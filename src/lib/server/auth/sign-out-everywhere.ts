import { eq } from 'drizzle-orm';
import type { Grant } from '$lib/server/access/require-permission';
import type { Database } from '$lib/server/db/client';
import { session } from '$lib/server/db/schema';

/** Ends every session of the person, in this browser and all others. */
export async function signOutEverywhere(
	db: Database,
	grant: Grant<'account:manage'>
): Promise<void> {
	await db.delete(session).where(eq(session.userId, grant.personId));
}

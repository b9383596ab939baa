import { and, eq, sql } from 'drizzle-orm';
import type { Queryable } from '$lib/server/db/client';
import { study } from '$lib/server/db/schema';

/** Held until the transaction ends: rigs, rooms and staff are shared by all studies of a lab. */
export async function lockLab(tx: Queryable, labId: string): Promise<void> {
	await tx.execute(sql`select pg_advisory_xact_lock(hashtext(${`lab-bookings:${labId}`}))`);
}

/** Counts a change of the study's plan; null when the plan is no longer the one that was seen. */
export async function countPlanChange(
	tx: Queryable,
	studyId: string,
	seenVersion: number
): Promise<number | null> {
	const [row] = await tx
		.update(study)
		.set({ planVersion: sql`${study.planVersion} + 1` })
		.where(and(eq(study.id, studyId), eq(study.planVersion, seenVersion)))
		.returning({ planVersion: study.planVersion });
	return row?.planVersion ?? null;
}

/** Counts a change that cannot be stale, such as a cancellation. */
export async function countPlanChangeAnyway(tx: Queryable, studyId: string): Promise<number> {
	const [row] = await tx
		.update(study)
		.set({ planVersion: sql`${study.planVersion} + 1` })
		.where(eq(study.id, studyId))
		.returning({ planVersion: study.planVersion });
	if (!row) throw new RangeError('a change of bookings requires a study that exists');
	return row.planVersion;
}

import { and, eq, gt, inArray, isNull } from 'drizzle-orm';
import type { Queryable } from '$lib/server/db/client';
import { bundle, decision } from '$lib/server/db/schema';

type Scope = { studyId: string; participantId?: string | undefined };

/** Revokes every open bundle of the study, or of one participant; answers how many. */
export async function revokeBundles(
	tx: Queryable,
	revokedAt: Date,
	{ studyId, participantId }: Scope
): Promise<number> {
	const rows = await tx
		.update(bundle)
		.set({ revokedAt })
		.where(
			and(
				eq(bundle.studyId, studyId),
				participantId ? eq(bundle.participantId, participantId) : undefined,
				isNull(bundle.revokedAt),
				gt(bundle.expiresAt, revokedAt)
			)
		)
		.returning({ id: bundle.id });
	return rows.length;
}

/**
 * Revokes the bundles of a visit whose rig or time is no longer the one they were sealed for, those
 * that have expired as well: the blocks are issued anew for the visit's next place.
 */
export async function revokeBundlesOfVisit(
	tx: Queryable,
	revokedAt: Date,
	{ participantId, visitNumber }: { participantId: string; visitNumber: number }
): Promise<void> {
	const ofVisit = tx
		.select({ id: decision.id })
		.from(decision)
		.where(and(eq(decision.participantId, participantId), eq(decision.visitNumber, visitNumber)));
	await tx
		.update(bundle)
		.set({ revokedAt })
		.where(and(inArray(bundle.decisionId, ofVisit), isNull(bundle.revokedAt)));
}

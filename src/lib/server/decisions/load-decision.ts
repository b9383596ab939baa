import { and, eq } from 'drizzle-orm';
import type { Queryable } from '$lib/server/db/client';
import { decision, settlement } from '$lib/server/db/schema';

export type DecisionWithSettlement = typeof decision.$inferSelect & {
	settlement: typeof settlement.$inferSelect | null;
};

/** One decision of a study with how it was settled; null when the study has no such decision. */
export async function loadDecisionWithSettlement(
	db: Queryable,
	{ decisionId, studyId }: { decisionId: string; studyId: string }
): Promise<DecisionWithSettlement | null> {
	const [row] = await db
		.select({ decision, settlement })
		.from(decision)
		.leftJoin(settlement, eq(settlement.decisionId, decision.id))
		.where(and(eq(decision.id, decisionId), eq(decision.studyId, studyId)));
	return row ? { ...row.decision, settlement: row.settlement } : null;
}

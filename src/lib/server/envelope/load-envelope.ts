import { and, count, eq, max, sql } from 'drizzle-orm';
import { describeEnvelope, readEnvelope } from '$lib/protocol/envelope';
import type { Grant } from '$lib/server/access/require-permission';
import type { Queryable } from '$lib/server/db/client';
import { envelopeCheck } from '$lib/server/db/schema';
import { mayReadRule } from '$lib/server/protocols/may-read-rule';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';

export type LoadedEnvelope = {
	lines: { term: string; text: string }[];
	/** Null for roles that see the approved numbers, not what happens. */
	breaches: { count: number; checkedCount: number } | null;
};

/** The approved numbers of a version with the breaches found so far; null for who may not read it. */
export async function loadEnvelope(
	db: Queryable,
	grant: Grant<'protocol:read'>,
	{ content, hash }: { content: ProtocolContent; hash: string }
): Promise<LoadedEnvelope | null> {
	if (!mayReadRule(grant)) return null;
	const seesBreaches = seesBreachCount(grant);
	return {
		lines: describeEnvelope(readEnvelope(content)),
		breaches: seesBreaches ? await countBreaches(db, { studyId: grant.studyId, hash }) : null
	};
}

/** The number of breaches is for the level `envelope`, and for those who see every decision. */
export function seesBreachCount(grant: Grant): boolean {
	const levels = grant.sees('block-parameters');
	return levels.has('envelope') || levels.has('yes');
}

const isBreach = sql`jsonb_array_length(${envelopeCheck.breaches}) > 0`;

async function countBreaches(
	db: Queryable,
	{ studyId, hash }: { studyId: string; hash: string }
): Promise<{ count: number; checkedCount: number }> {
	const [row] = await db
		.select({
			count: sql<number>`count(*) filter (where ${isBreach})::int`,
			checkedCount: count()
		})
		.from(envelopeCheck)
		.where(and(eq(envelopeCheck.studyId, studyId), eq(envelopeCheck.protocolHash, hash)));
	return row ?? { count: 0, checkedCount: 0 };
}

/** Breaches of all versions of a study and when the last was found, for the list of what waits. */
export async function findBreachCount(db: Queryable, studyId: string) {
	const [row] = await db
		.select({ count: count(), lastAt: max(envelopeCheck.checkedAt) })
		.from(envelopeCheck)
		.where(and(eq(envelopeCheck.studyId, studyId), isBreach));
	return { count: row?.count ?? 0, lastAtMs: row?.lastAt?.getTime() ?? null };
}

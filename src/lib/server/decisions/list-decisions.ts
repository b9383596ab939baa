import { and, asc, desc, eq, inArray } from 'drizzle-orm';
import type { DecisionKind } from '$scheduler/policies/policy-memory';
import { describeKind } from '$lib/decisions/kind-words';
import type { Grant } from '$lib/server/access/require-permission';
import type { Database } from '$lib/server/db/client';
import { decision, lab, participant } from '$lib/server/db/schema';

export type DecisionRow = {
	id: string;
	code: string;
	visitNumber: number;
	blockNumber: number;
	kind: DecisionKind;
	kindWords: string;
	reason: string;
	state: 'automatic' | 'held' | 'settled' | 'fallback';
	decidedAtMs: number;
	readyAtMs: number | null;
};

const pageSize = 200;

/** Held decisions by the hour they are due; then the latest others. For roles that see decisions. */
export async function listDecisions(
	db: Database,
	grant: Grant<'decision:read'>
): Promise<{ zone: string; held: DecisionRow[]; others: DecisionRow[] }> {
	const [place] = await db.select({ zone: lab.zone }).from(lab).where(eq(lab.id, grant.labId));
	const held = await select(db)
		.where(and(eq(decision.studyId, grant.studyId), eq(decision.state, 'held')))
		.orderBy(asc(decision.readyAt), asc(participant.code));
	const others = await select(db)
		.where(
			and(
				eq(decision.studyId, grant.studyId),
				inArray(decision.state, ['automatic', 'settled', 'fallback'])
			)
		)
		.orderBy(desc(decision.decidedAt), asc(participant.code))
		.limit(pageSize);
	return { zone: place?.zone ?? 'UTC', held: held.map(toRow), others: others.map(toRow) };
}

function select(db: Database) {
	return db
		.select({
			id: decision.id,
			code: participant.code,
			visitNumber: decision.visitNumber,
			blockNumber: decision.blockNumber,
			kind: decision.kind,
			reason: decision.code,
			state: decision.state,
			decidedAt: decision.decidedAt,
			readyAt: decision.readyAt
		})
		.from(decision)
		.innerJoin(participant, eq(participant.id, decision.participantId))
		.$dynamic();
}

type Selected = Awaited<ReturnType<typeof select>>[number];

function toRow({ decidedAt, readyAt, ...row }: Selected): DecisionRow {
	return {
		...row,
		kindWords: describeKind(row.kind),
		decidedAtMs: decidedAt.getTime(),
		readyAtMs: readyAt?.getTime() ?? null
	};
}

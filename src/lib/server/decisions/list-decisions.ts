import { and, asc, desc, eq, inArray, isNotNull, sql } from 'drizzle-orm';
import type { Reason } from '$scheduler/policies/decision';
import { explainReason } from '$scheduler/policies/explain';
import type { DecisionKind } from '$scheduler/policies/policy-memory';
import type { WordContext } from '$scheduler/policies/words/read-values';
import { describeKind } from '$lib/decisions/kind-words';
import type { Grant } from '$lib/server/access/require-permission';
import type { Database } from '$lib/server/db/client';
import { decision, lab, participant, protocolVersion } from '$lib/server/db/schema';
import { createWordContext } from './word-context';

export type DecisionRow = {
	id: string;
	code: string;
	visitNumber: number;
	blockNumber: number;
	kind: DecisionKind;
	kindWords: string;
	/** Code of the deciding reason, and the same as a sentence. */
	reason: string;
	reasonWords: string;
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
	const contextOf = await loadContexts(db, grant.studyId);
	const write = (row: Selected) => toRow(row, contextOf(row.versionId));
	return { zone: place?.zone ?? 'UTC', held: held.map(write), others: others.map(write) };
}

/** What the words of a reason depend on, by the version that a person is on. */
async function loadContexts(db: Database, studyId: string) {
	const rows = await db
		.select({ id: protocolVersion.id, content: protocolVersion.content })
		.from(protocolVersion)
		.where(and(eq(protocolVersion.studyId, studyId), isNotNull(protocolVersion.hash)));
	const contents = new Map(rows.map(({ id, content }) => [id, content]));
	const contexts = new Map<string, WordContext>();
	return (versionId: string): WordContext => {
		const content = contents.get(versionId);
		if (!content) throw new RangeError('a participant is on a version that is not frozen');
		const known = contexts.get(versionId) ?? createWordContext(content);
		contexts.set(versionId, known);
		return known;
	};
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
			deciding: sql<Reason | null>`${decision.output}::jsonb -> 'reasons' -> 0`,
			versionId: participant.protocolVersionId,
			state: decision.state,
			decidedAt: decision.decidedAt,
			readyAt: decision.readyAt
		})
		.from(decision)
		.innerJoin(participant, eq(participant.id, decision.participantId))
		.$dynamic();
}

type Selected = Awaited<ReturnType<typeof select>>[number];

function toRow(selected: Selected, context: WordContext): DecisionRow {
	const { decidedAt, readyAt, deciding, versionId: _version, ...row } = selected;
	return {
		...row,
		reasonWords: deciding ? explainReason(deciding, context).text : '',
		kindWords: describeKind(row.kind),
		decidedAtMs: decidedAt.getTime(),
		readyAtMs: readyAt?.getTime() ?? null
	};
}

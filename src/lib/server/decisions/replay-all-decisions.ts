import { and, asc, eq, gt } from 'drizzle-orm';
import type { Database } from '$lib/server/db/client';
import { decision, participant } from '$lib/server/db/schema';
import { replayStoredDecision } from './replay-stored-decision';

export type ReplayedDecision = {
	id: string;
	code: string;
	visitNumber: number;
	blockNumber: number;
	cause: string;
	name: string;
	stored: string;
	recomputed: string;
};
export type ReplaySummary = {
	decisionCount: number;
	equalCount: number;
	otherVersionCount: number;
	/** Those that came out different, at most 50. */
	different: ReplayedDecision[];
};

const pageSize = 100;
const shownMax = 50;

/** Makes every stored decision of a study again and counts those that come out equal. */
export async function replayAllDecisions(db: Database, studyId: string): Promise<ReplaySummary> {
	const summary: ReplaySummary = {
		decisionCount: 0,
		equalCount: 0,
		otherVersionCount: 0,
		different: []
	};
	for (let after = '00000000-0000-0000-0000-000000000000'; ;) {
		const rows = await db
			.select({
				id: decision.id,
				code: participant.code,
				visitNumber: decision.visitNumber,
				blockNumber: decision.blockNumber
			})
			.from(decision)
			.innerJoin(participant, eq(participant.id, decision.participantId))
			.where(and(eq(decision.studyId, studyId), gt(decision.id, after)))
			.orderBy(asc(decision.id))
			.limit(pageSize);
		for (const row of rows) await addReplay(db, summary, row);
		const last = rows.at(-1);
		if (!last || rows.length < pageSize) return summary;
		after = last.id;
	}
}

type Row = Pick<ReplayedDecision, 'id' | 'code' | 'visitNumber' | 'blockNumber'>;

async function addReplay(db: Database, summary: ReplaySummary, row: Row): Promise<void> {
	const verdict = await replayStoredDecision(db, row.id);
	summary.decisionCount += 1;
	if (verdict.equal) {
		summary.equalCount += 1;
		if (!verdict.sameVersions) summary.otherVersionCount += 1;
	} else if (summary.different.length < shownMax) {
		const { cause, name, stored, recomputed } = verdict;
		summary.different.push({ ...row, cause, name, stored, recomputed });
	}
}

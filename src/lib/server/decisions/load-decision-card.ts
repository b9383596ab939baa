import { eq } from 'drizzle-orm';
import type { DecisionRecord } from '$scheduler/policies/decision-record';
import { explainReason } from '$scheduler/policies/explain';
import type { WordContext } from '$scheduler/policies/words/read-values';
import { computeWilsonInterval } from '$scheduler/statistics/wilson-interval';
import { describeKind } from '$lib/decisions/kind-words';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Database } from '$lib/server/db/client';
import { decision, lab, person as personTable } from '$lib/server/db/schema';
import { describeRecord, readRecord } from './describe-record';
import { findEffectiveBlock } from './effective-block';
import { createWordContext } from './word-context';
import { loadPerson, type PersonOnRecord, type StoredDecision } from './load-person';

/** One decision with everything an approver needs to settle it, as plain data. */
export type DecisionCard = NonNullable<Awaited<ReturnType<typeof loadDecisionCard>>>;

/** The card of one decision of the study in the grant; null when it has none such. */
export async function loadDecisionCard(
	db: Database,
	clock: Clock,
	grant: Grant<'decision:read'>,
	decisionId: string
) {
	const found = await findDecision(db, grant, decisionId);
	if (!found) return null;
	const { person, stored } = found;
	const record = readRecord(stored);
	const [place] = await db.select({ zone: lab.zone }).from(lab).where(eq(lab.id, grant.labId));
	return {
		id: stored.id,
		code: person.code,
		visitNumber: stored.visitNumber,
		blockNumber: stored.blockNumber,
		zone: place?.zone ?? 'UTC',
		nowMs: clock.now(),
		state: stored.state,
		holdReasons: stored.holdReasons,
		guardRails: person.content.guardRails,
		decidedAtMs: stored.decidedAt.getTime(),
		readyAtMs: stored.readyAt?.getTime() ?? null,
		...describeRecord(record),
		before: listEarlierRegions(person, stored),
		way: listWay(person),
		versions: { engine: stored.engineVersion, runtime: stored.runtimeVersion },
		digest: stored.inputsDigest,
		policyHash: stored.policyHash,
		protocolHash: stored.protocolHash,
		effective: findEffectiveBlock(stored),
		settlement: await describeSettlement(db, stored)
	};
}

async function findDecision(db: Database, grant: Grant, decisionId: string) {
	if (!/^[0-9a-f-]{36}$/i.test(decisionId)) return null;
	const [row] = await db
		.select({ participantId: decision.participantId, studyId: decision.studyId })
		.from(decision)
		.where(eq(decision.id, decisionId));
	if (!row || row.studyId !== grant.studyId) return null;
	const person = await loadPerson(db, row.participantId, { lock: false });
	const stored = person?.decisions.find((candidate) => candidate.id === decisionId);
	return person && stored ? { person, stored } : null;
}

/** What the regions before this decision did: hits outside, seen against expected if unmoved. */
function listEarlierRegions(person: PersonOnRecord, stored: StoredDecision) {
	const index = person.decisions.findIndex((found) => found.id === stored.id);
	return person.decisions.slice(0, index + 1).flatMap((found) => {
		const { facts } = JSON.parse(found.output) as Pick<DecisionRecord, 'facts'>;
		if (!facts.escape) return [];
		const { n, solved, stay } = facts.escape;
		const interval = computeWilsonInterval({ successCount: solved, trialCount: n, level: 0.95 });
		return [
			{
				label: `before visit ${found.visitNumber}, block ${found.blockNumber}`,
				estimate: solved / n,
				low: interval.lower,
				high: interval.upper,
				expected: stay
			}
		];
	});
}

/** The person's way so far: one piece a block, with what was decided and what runs. */
function listWay(person: PersonOnRecord) {
	const context = createWordContext(person.content);
	return person.decisions.map((found) => ({
		id: found.id,
		visitNumber: found.visitNumber,
		blockNumber: found.blockNumber,
		decided: describeKind(found.kind),
		runs: describeKind(findEffectiveBlock(found)?.kind ?? 'hold'),
		why: explainFirst(found, context),
		state: found.state
	}));
}

function explainFirst({ output }: StoredDecision, context: WordContext): string {
	const [reason] = (JSON.parse(output) as Pick<DecisionRecord, 'reasons'>).reasons;
	return reason ? explainReason(reason, context).text : '';
}

async function describeSettlement(db: Database, stored: StoredDecision) {
	const { settlement } = stored;
	if (!settlement) return null;
	const [by] = settlement.settledBy
		? await db
				.select({ name: personTable.name })
				.from(personTable)
				.where(eq(personTable.id, settlement.settledBy))
		: [];
	return {
		action: settlement.action,
		reason: settlement.reason,
		by: by?.name ?? null,
		atMs: settlement.settledAt.getTime()
	};
}

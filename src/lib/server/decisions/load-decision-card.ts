import { eq } from 'drizzle-orm';
import { decisionRecordSchema, type DecisionRecord } from '$scheduler/policies/decision-record';
import { explainRecord } from '$scheduler/policies/explain';
import { computeWilsonInterval } from '$scheduler/statistics/wilson-interval';
import { describeKind } from '$lib/decisions/kind-words';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Database } from '$lib/server/db/client';
import { decision, lab, person as personTable } from '$lib/server/db/schema';
import { findEffectiveBlock } from './effective-block';
import { loadPerson, type PersonOnRecord, type StoredDecision } from './load-person';
import { pictureCloud } from './picture-cloud';

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
	const explained = explainRecord(record);
	return {
		id: stored.id,
		code: person.code,
		visitNumber: stored.visitNumber,
		blockNumber: stored.blockNumber,
		zone: place?.zone ?? 'UTC',
		nowMs: clock.now(),
		kind: stored.kind,
		kindWords: describeKind(stored.kind),
		state: stored.state,
		holdReasons: stored.holdReasons,
		guardRails: person.content.guardRails,
		coverNever: record.inputs.protocol.place.coverMax,
		decidedAtMs: stored.decidedAt.getTime(),
		readyAtMs: stored.readyAt?.getTime() ?? null,
		explained,
		weighed: listWeighed(record),
		region: describeRegion(record),
		facts: listFacts(record),
		picture: pictureCloud(record),
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

/** The stored parts put together as the engine wrote them. */
export function readRecord(stored: { inputs: string; output: string }): DecisionRecord {
	const output = JSON.parse(stored.output) as object;
	return decisionRecordSchema.parse({ ...output, inputs: JSON.parse(stored.inputs) });
}

/** One row for each share that was weighed. */
function listWeighed(record: DecisionRecord) {
	const rungs = [...(record.facts.place ?? []), ...(record.facts.lean ?? [])];
	const sd = record.facts.geometry?.sdTangent ?? null;
	return rungs.map((rung) => {
		const exits = [rung.exitPlus, rung.exitMinus].flatMap((s) => (s === null ? [] : [Math.abs(s)]));
		const nearest = exits.length > 0 && sd ? Math.min(...exits) / sd : null;
		return {
			share: rung.share,
			lean: rung.lean,
			wayOutSd: nearest,
			stay: rung.staySuccess,
			cover: rung.cover,
			accepted: rung.accepted,
			refusal: rung.refusal
		};
	});
}

function describeRegion(record: DecisionRecord) {
	const region = record.parameters.region;
	if (!region) return null;
	const { variables } = record.inputs.task;
	return {
		share: region.share,
		stay: region.stay,
		reachSd: region.reachSd ?? null,
		success: region.nearestSuccess ?? null,
		center: variables.map(({ name, unit }, index) => ({
			name: name.replaceAll('_', ' '),
			unit,
			value: region.centerInUnits?.[index] ?? null
		}))
	};
}

function listFacts(record: DecisionRecord) {
	const { geometry, gates, band } = record.facts;
	return {
		alignmentDeg: geometry?.alignmentDeg ?? null,
		eigenvalueRatio: geometry?.eigenvalueRatio ?? null,
		driftP: gates?.pTrend ?? null,
		outlierShare: gates?.outlierShare ?? null,
		bandDistance: band?.distance ?? null,
		bandLimit: band?.limit ?? null,
		aims: record.inputs.protocol.aims,
		done: record.memory.done
	};
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
	return person.decisions.map((found) => ({
		id: found.id,
		visitNumber: found.visitNumber,
		blockNumber: found.blockNumber,
		decided: describeKind(found.kind),
		runs: describeKind(findEffectiveBlock(found)?.kind ?? 'hold'),
		code: found.code,
		state: found.state
	}));
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

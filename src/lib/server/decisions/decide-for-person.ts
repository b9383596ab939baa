import { eq } from 'drizzle-orm';
import { decideNextBlock } from '$scheduler/policies/decide';
import type { DecisionRecord } from '$scheduler/policies/decision-record';
import { moveIfDue } from '$lib/server/amendments/move-followers';
import type { Clock } from '$lib/server/clock';
import type { Database, Transaction } from '$lib/server/db/client';
import { decision } from '$lib/server/db/schema';
import { canonicalJson, sha256Hex } from '$lib/server/record/canonical-json';
import { recordEvent } from '$lib/server/record/record-event';
import { pairParticipant } from '$lib/server/yoking/pair-participant';
import { buildInputs } from './build-inputs';
import { findHoldReasons, type HoldReason } from './find-hold-reasons';
import { findNextSlot, slotKey, type Slot } from './find-next-slot';
import { findInheritedHold } from './find-inherited-hold';
import { loadMasterChain } from './load-master-chain';
import { loadPerson, type PersonOnRecord } from './load-person';
import { passBaseline } from './pass-baseline';
import { readStoredTrials } from './read-stored-trials';
import { applyFallback } from './settle-decision';
import { currentVersions, hashPolicy } from './versions';

/** Blocks inside a visit follow the trials in this fixed time, in every arm. */
export const insideVisitReadyMs = 5_000;

export type DecideServices = {
	clock: Clock;
	/** Releases the next entry of the sealed sequence for one person whose baseline passed. */
	allocate: (tx: Transaction, participantId: string) => Promise<boolean>;
};

/**
 * Decides everything that can be decided for one participant now, the same way in every arm: after
 * baseline data passed the person is allocated, and each place whose data are in, or whose ready
 * hour has come, gets its decision.
 *
 * @returns how many decisions were made
 */
export async function decideForPerson(
	db: Database,
	services: DecideServices,
	participantId: string
): Promise<number> {
	let count = 0;
	while (await db.transaction((tx) => decideOne(tx, services, participantId))) count += 1;
	return count;
}

async function decideOne(
	tx: Transaction,
	services: DecideServices,
	participantId: string
): Promise<boolean> {
	const { clock } = services;
	const locked = await loadPerson(tx, participantId, { lock: true });
	if (!locked || locked.state === 'withdrawn') return false;
	const passed = await passBaseline(tx, services, locked);
	const loaded = passed ? await loadPerson(tx, participantId, { lock: false }) : locked;
	const person = loaded && (await followAmendment(tx, clock, loaded));
	if (!person) return false;
	const progress = describeProgress(person, clock);
	const slot = findNextSlot(person.slots, progress);
	if (!slot || isTooEarly(person, slot, progress)) return false;
	await decideSlot(tx, services, { person, slot });
	return true;
}

/** Before a visit's first block is decided, the person is moved over to an amendment that is due. */
async function followAmendment(
	tx: Transaction,
	clock: Clock,
	person: PersonOnRecord
): Promise<PersonOnRecord | null> {
	const slot = findNextSlot(person.slots, describeProgress(person, clock));
	if (slot?.indexInVisit !== 0) return person;
	const { id: participantId, studyId } = person;
	const isMoved = await moveIfDue(tx, clock, { studyId, participantId });
	return isMoved ? loadPerson(tx, participantId, { lock: false }) : person;
}

/**
 * A yoked person's next visit is decided at its ready hour and no sooner: until then the master may still
 * run the block. When it is shown as ready does not change.
 */
function isTooEarly(
	person: PersonOnRecord,
	slot: Slot,
	{ isDue, stored }: ReturnType<typeof describeProgress>
): boolean {
	const arm = person.content.arms.find(({ key }) => key === person.arm);
	if (arm?.rule !== 'yoked' || slot.purpose !== 'adaptive' || slot.indexInVisit > 0) return false;
	return !isDue(slot.visitNumber) && !stored.has(slotKey(slot));
}

function describeProgress(person: PersonOnRecord, clock: Clock) {
	const isDue = (visitNumber: number) => {
		const readyAt = findVisitReadyAt(person, visitNumber);
		return readyAt !== null && readyAt <= clock.now();
	};
	const later = [...person.visits.keys()].filter(isDue);
	return {
		decided: new Set(person.decisions.map(slotKey)),
		stored: new Set(person.blocks.keys()),
		isDue,
		isOver: (visitNumber: number) => later.some((number) => number > visitNumber),
		isAllocated: person.arm !== null
	};
}

/** The hour at which a visit's first block becomes ready: the protocol's lead before its start. */
export function findVisitReadyAt(person: PersonOnRecord, visitNumber: number): number | null {
	const visit = person.visits.get(visitNumber);
	if (!visit) return null;
	return visit.during.startsAt.getTime() - person.content.readyLeadHours * 3_600_000;
}

type Place = { person: PersonOnRecord; slot: Slot };

async function decideSlot(tx: Transaction, services: DecideServices, { person, slot }: Place) {
	const { clock } = services;
	const nowMs = clock.now();
	const readTrials = (blockId: string) => readStoredTrials(tx, blockId);
	const inputs = await buildInputs(person, slot, {
		...{ readTrials, nowMs },
		readMaster: async () => loadMasterChain(tx, await findMaster(tx, clock, person), readTrials)
	});
	const policyHash = hashPolicy(person.content);
	const record = decideNextBlock({
		...inputs,
		versions: currentVersions(policyHash),
		digest: sha256Hex
	});
	const holdReasons = findHold(person, record);
	const [row] = await tx
		.insert(decision)
		.values({
			studyId: person.studyId,
			participantId: person.id,
			visitNumber: slot.visitNumber,
			blockNumber: slot.blockNumber,
			protocolHash: person.protocolHash,
			policyHash,
			...splitRecord(record),
			holdReasons,
			state: holdReasons.length > 0 ? 'held' : 'automatic',
			decidedAt: new Date(nowMs),
			readyAt: findReadyAt({ person, slot }, clock)
		})
		.returning({ id: decision.id });
	if (!row) throw new Error('decision was not stored');
	await recordEvent(
		tx,
		clock,
		{ kind: 'system' },
		{
			kind: 'decision-made',
			item: 'decision',
			studyId: person.studyId,
			participantId: person.id,
			body: { decisionId: row.id, inputsDigest: record.inputsDigest, policyHash }
		}
	);
	if (holdReasons.length > 0 && slot.indexInVisit > 0) {
		const reason = 'Inside a visit nobody is waited for.';
		await applyFallback(tx, clock, { studyId: person.studyId, decisionId: row.id, reason });
	}
}

/** The master of a yoked person; one that was not free at allocation may be by now. */
async function findMaster(tx: Transaction, clock: Clock, person: PersonOnRecord) {
	if (person.arm === null) return null;
	const { id: participantId, studyId, arm, content } = person;
	return pairParticipant(tx, clock, { participantId, studyId, arm, content });
}

function splitRecord(record: DecisionRecord) {
	const { inputs, ...output } = record;
	return {
		engineVersion: record.engineVersion,
		runtimeVersion: record.runtimeVersion,
		inputsDigest: record.inputsDigest,
		inputs: canonicalJson(inputs),
		output: canonicalJson(output),
		kind: record.kind,
		code: record.reasons[0]?.code ?? 'NONE'
	};
}

/** Why a person must look first; nothing for rules that only repeat what already ran. */
function findHold(person: PersonOnRecord, record: DecisionRecord): HoldReason[] {
	const code = record.reasons[0]?.code ?? 'NONE';
	if (code === 'CONTINUE-REGION') return [];
	if (code === 'UNCHANGED') return findInheritedHold(person, record);
	const weighed = [...(record.facts.place ?? []), ...(record.facts.lean ?? [])];
	const chosen = weighed.filter((rung) => rung.accepted).at(-1);
	const { region, rule, level = 0, levels = [] } = record.parameters;
	const choice = {
		kind: record.kind,
		code,
		coverShare: chosen?.cover ?? null,
		reachSd: region?.reachSd ?? null,
		catchShare: region ? Math.max(region.share, region.catch ?? 0) : null,
		moveBy: Math.max(0, ...[level, rule?.goal ?? 0, ...levels].map(Math.abs))
	};
	return findHoldReasons(choice, person.content.guardRails, person.content.limits);
}

/** Before a visit: its ready hour. Inside a visit: a fixed few seconds after the trials are in. */
function findReadyAt({ person, slot }: Place, clock: Clock): Date | null {
	const soon = clock.now() + insideVisitReadyMs;
	if (slot.indexInVisit > 0) return new Date(soon);
	const readyAt = findVisitReadyAt(person, slot.visitNumber);
	return readyAt === null ? null : new Date(readyAt);
}

/** Moves the ready hours of decisions whose visit was booked or moved since. */
export async function alignReadyHours(db: Database, participantId: string): Promise<void> {
	await db.transaction(async (tx) => {
		const person = await loadPerson(tx, participantId, { lock: true });
		if (!person) return;
		for (const found of person.decisions) {
			const slot = person.slots.find((other) => slotKey(other) === slotKey(found));
			if (!slot || slot.indexInVisit > 0 || person.blocks.has(slotKey(found))) continue;
			const readyAt = findVisitReadyAt(person, found.visitNumber);
			if (readyAt === (found.readyAt?.getTime() ?? null)) continue;
			await tx
				.update(decision)
				.set({ readyAt: readyAt === null ? null : new Date(readyAt) })
				.where(eq(decision.id, found.id));
		}
	});
}

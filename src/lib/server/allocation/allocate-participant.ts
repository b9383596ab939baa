import { and, count, eq, sql } from 'drizzle-orm';
import { deriveEntry } from '$scheduler/allocation/permuted-blocks';
import type { Clock } from '$lib/server/clock';
import type { Settings } from '$lib/server/config';
import type { Transaction } from '$lib/server/db/client';
import {
	allocation,
	participant,
	protocolVersion,
	type AllocationMethod
} from '$lib/server/db/schema';
import { createAllocationStream, openAllocation } from '$lib/server/keys/allocation-seal';
import { isPaused } from '$lib/server/pauses/is-paused';
import { recordEvent } from '$lib/server/record/record-event';
import { findStartBehind } from '$lib/server/yoking/find-start-behind';
import { pairParticipant } from '$lib/server/yoking/pair-participant';
import { findSeal } from './find-seal';

type Services = { clock: Clock; settings: Pick<Settings, 'OVALRY_ALLOCATION_KEY'> };

const quarterHourMs = 900_000;

/**
 * Releases the next entry of the sealed sequence for one person whose baseline passed, and gives
 * them an earliest start, drawn from one distribution whatever the arm; a yoked person starts no sooner
 * than their master's chain allows. Only that entry is derived; nothing is kept from which a later one
 * could be read.
 *
 * @returns false while the person is not ready, is allocated already, is paused, or nothing is sealed
 */
export async function allocateParticipant(
	tx: Transaction,
	{ clock, settings }: Services,
	participantId: string
): Promise<boolean> {
	const person = await loadReady(tx, participantId);
	if (!person || (await isPaused(tx, person.studyId, participantId))) return false;
	await tx.execute(sql`select pg_advisory_xact_lock(hashtext(${`allocation:${person.studyId}`}))`);
	const seal = await findSeal(tx, person.studyId, person.hash);
	if (!seal) return false;
	const [taken] = await tx
		.select({ n: count() })
		.from(allocation)
		.where(eq(allocation.sealId, seal.id));
	const sequenceIndex = taken?.n ?? 0;
	const { seed } = openAllocation(settings.OVALRY_ALLOCATION_KEY, person.studyId, {
		sealed: seal.sealedSeed,
		commitment: seal.commitment
	});
	const armId = deriveArm(seed, seal.method, sequenceIndex);
	const at = new Date(clock.now());
	const entry = { participantId, studyId: person.studyId, sealId: seal.id, sequenceIndex };
	await tx.insert(allocation).values({ ...entry, arm: armId, allocatedAt: at });
	const { studyId, content } = person;
	const masterId = await pairParticipant(tx, clock, {
		participantId,
		studyId,
		arm: armId,
		content
	});
	const drawn = drawEarliestStart(seed, { sequenceIndex, at, ...content.earliestStartHours });
	const earliestStartAt = masterId
		? await findStartBehind(tx, { masterId, content, drawn })
		: drawn;
	await tx
		.update(participant)
		.set({ state: 'allocated', allocatedAt: at, earliestStartAt })
		.where(eq(participant.id, participantId));
	const system = { kind: 'system' } as const;
	const kind = 'participant-allocated';
	await recordEvent(tx, clock, system, { kind, item: 'participant-state', studyId, participantId });
	await recordEvent(tx, clock, system, {
		kind: 'arm-released',
		item: 'arm',
		studyId,
		participantId,
		body: { arm: armId, sequenceIndex, protocolHash: person.hash }
	});
	return true;
}

/** The arm of one entry. A study of one arm has nothing to draw. */
function deriveArm(seed: Uint8Array, method: AllocationMethod, index: number): string {
	const [only, second] = method.arms;
	if (only !== undefined && second === undefined) return only;
	const { armId } = deriveEntry({
		scheme: {
			arms: method.arms.map((id) => ({ id, weight: 1 })),
			blockSizes: method.blockSizes
		},
		stratum: 'all',
		index,
		openStream: (name) => createAllocationStream(seed, name)
	});
	return armId;
}

async function loadReady(tx: Transaction, participantId: string) {
	const [row] = await tx
		.select({
			studyId: participant.studyId,
			hash: protocolVersion.hash,
			content: protocolVersion.content
		})
		.from(participant)
		.innerJoin(protocolVersion, eq(protocolVersion.id, participant.protocolVersionId))
		.where(and(eq(participant.id, participantId), eq(participant.state, 'baseline-done')))
		.for('update', { of: participant });
	if (!row?.hash) return null;
	return { studyId: row.studyId, hash: row.hash, content: row.content };
}

type Draw = { sequenceIndex: number; at: Date; min: number; max: number };

/** Uniform between the protocol's hours after allocation, on the next quarter of an hour. */
function drawEarliestStart(seed: Uint8Array, { sequenceIndex, at, min, max }: Draw): Date {
	const stream = createAllocationStream(seed, `earliest-start ${sequenceIndex}`);
	const hours = min + (stream.nextUint32() / 2 ** 32) * (max - min);
	const ms = at.getTime() + hours * 3_600_000;
	return new Date(Math.ceil(ms / quarterHourMs) * quarterHourMs);
}

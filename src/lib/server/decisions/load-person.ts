import { and, asc, eq, inArray } from 'drizzle-orm';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import { findArm } from '$lib/server/allocation/find-arm';
import type { Queryable } from '$lib/server/db/client';
import {
	block,
	booking,
	bundle,
	decision,
	participant,
	protocolVersion,
	settlement,
	type InstantRange
} from '$lib/server/db/schema';
import { listSlots, slotKey, type Slot } from './find-next-slot';

export type StoredDecision = typeof decision.$inferSelect & {
	settlement: typeof settlement.$inferSelect | null;
	/** Whether its file was handed to a rig. */
	wasIssued: boolean;
};
export type StoredBlock = typeof block.$inferSelect;

/** Everything the decisions of one participant rest on, as the database has it. */
export type PersonOnRecord = {
	id: string;
	studyId: string;
	code: string;
	state: string;
	arm: string | null;
	content: ProtocolContent;
	protocolHash: string;
	slots: Slot[];
	/** In the order in which they were made. */
	decisions: StoredDecision[];
	blocks: Map<string, StoredBlock>;
	visits: Map<number, { bookingId: string; during: InstantRange; rigId: string; state: string }>;
};

/**
 * Loads one participant; with `lock`, no other transaction decides for them meanwhile. With
 * `protocolHash` as by that version of the protocol: somebody moved over since had an earlier one.
 */
export async function loadPerson(
	tx: Queryable,
	participantId: string,
	{ lock, protocolHash }: { lock: boolean; protocolHash?: string }
): Promise<PersonOnRecord | null> {
	const query = tx
		.select({
			id: participant.id,
			studyId: participant.studyId,
			code: participant.code,
			state: participant.state,
			content: protocolVersion.content,
			hash: protocolVersion.hash
		})
		.from(participant)
		.innerJoin(protocolVersion, eq(protocolVersion.id, participant.protocolVersionId))
		.where(eq(participant.id, participantId));
	const [row] = lock ? await query.for('update', { of: participant }) : await query;
	if (!row?.hash) return null;
	const { hash: ownHash, ...person } = row;
	const hash = protocolHash ?? ownHash;
	const content =
		hash === ownHash ? person.content : await loadContentOf(tx, { studyId: person.studyId, hash });
	const own = { ...person, content };
	const arm = await findArm(tx, participantId);
	return {
		...own,
		protocolHash: hash,
		arm,
		slots: listSlots(own.content.visits, arm),
		decisions: await loadDecisions(tx, participantId),
		blocks: await loadBlocks(tx, participantId),
		visits: await loadVisits(tx, participantId)
	};
}

async function loadContentOf(
	tx: Queryable,
	{ studyId, hash }: { studyId: string; hash: string }
): Promise<ProtocolContent> {
	const [row] = await tx
		.select({ content: protocolVersion.content })
		.from(protocolVersion)
		.where(and(eq(protocolVersion.studyId, studyId), eq(protocolVersion.hash, hash)));
	if (!row) throw new RangeError('the study has no version with this hash');
	return row.content;
}

async function loadDecisions(tx: Queryable, participantId: string): Promise<StoredDecision[]> {
	const rows = await tx
		.select({ decision, settlement, bundleId: bundle.id })
		.from(decision)
		.leftJoin(settlement, eq(settlement.decisionId, decision.id))
		.leftJoin(bundle, eq(bundle.decisionId, decision.id))
		.where(eq(decision.participantId, participantId))
		.orderBy(asc(decision.visitNumber), asc(decision.blockNumber));
	const byId = new Map<string, StoredDecision>();
	for (const row of rows) {
		byId.set(row.decision.id, {
			...row.decision,
			settlement: row.settlement,
			wasIssued: row.bundleId !== null
		});
	}
	return [...byId.values()];
}

async function loadBlocks(tx: Queryable, participantId: string): Promise<Map<string, StoredBlock>> {
	const rows = await tx.select().from(block).where(eq(block.participantId, participantId));
	return new Map(rows.map((row) => [slotKey(row), row]));
}

async function loadVisits(tx: Queryable, participantId: string): Promise<PersonOnRecord['visits']> {
	const rows = await tx
		.select({
			visitNumber: booking.visitNumber,
			bookingId: booking.id,
			during: booking.during,
			rigId: booking.rigId,
			state: booking.state
		})
		.from(booking)
		.where(
			and(eq(booking.participantId, participantId), inArray(booking.state, ['booked', 'attended']))
		);
	return new Map(rows.map(({ visitNumber, ...rest }) => [visitNumber, rest]));
}

import { eq, sql } from 'drizzle-orm';
import {
	computeMatchScales,
	pairInOrder,
	type Candidate
} from '$scheduler/policies/yoking/match-people';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import type { Clock } from '$lib/server/clock';
import type { Transaction } from '$lib/server/db/client';
import { allocation, yokedPair, type PairScales } from '$lib/server/db/schema';
import { recordEvent } from '$lib/server/record/record-event';
import { loadBaselines, type Baseline } from './load-baselines';

type Partner = { participantId: string; studyId: string; arm: string; content: ProtocolContent };

/**
 * Gives a participant of a yoked arm the free member of the master arm whose baseline is most like
 * theirs. A pair once made stays, and so do the scales of the first one.
 *
 * Source:  method sheet D5 (Match).
 * @returns the master; null in another arm, or while every master has a partner
 */
export async function pairParticipant(
	tx: Transaction,
	clock: Clock,
	partner: Partner
): Promise<string | null> {
	const { participantId, studyId, content } = partner;
	const master = content.arms.find(({ key }) => key === partner.arm)?.master;
	if (master === undefined) return null;
	await tx.execute(sql`select pg_advisory_xact_lock(hashtext(${`yoking:${studyId}`}))`);
	const known = await tx.select().from(yokedPair).where(eq(yokedPair.studyId, studyId));
	const own = known.find((pair) => pair.participantId === participantId);
	if (own) return own.masterId;
	const baselines = await loadBaselines(tx, studyId);
	const arms = await loadArms(tx, studyId);
	const taken = new Set(known.map(({ masterId }) => masterId));
	const free = baselines.filter(({ id }) => arms.get(id) === master && !taken.has(id));
	const found = match({ partnerId: participantId, baselines, free, scales: known[0]?.scales });
	if (!found) return null;
	const { masterId, distance, scales } = found;
	const pairedAt = new Date(clock.now());
	await tx
		.insert(yokedPair)
		.values({ participantId, masterId, studyId, distance, scales, pairedAt });
	await recordEvent(
		tx,
		clock,
		{ kind: 'system' },
		{ kind: 'pair-made', item: 'arm', studyId, participantId, body: { masterId, distance, scales } }
	);
	return masterId;
}

type Match = {
	partnerId: string;
	baselines: readonly Baseline[];
	free: readonly Baseline[];
	scales: PairScales | undefined;
};

function match({ partnerId, baselines, free, scales: frozen }: Match) {
	const self = baselines.find(({ id }) => id === partnerId);
	if (!self || free.length === 0) return null;
	const scales = frozen ?? computeMatchScales(baselines.map(({ traits }) => traits));
	const toCandidate = ({ code, traits }: Baseline): Candidate => ({ code, traits });
	const { pairs } = pairInOrder({
		partners: [toCandidate(self)],
		masters: free.map(toCandidate),
		scales
	});
	const [pair] = pairs;
	const found = free.find(({ code }) => code === pair?.master);
	return pair && found ? { masterId: found.id, distance: pair.distance, scales } : null;
}

async function loadArms(tx: Transaction, studyId: string): Promise<Map<string, string>> {
	const rows = await tx
		.select({ id: allocation.participantId, arm: allocation.arm })
		.from(allocation)
		.where(eq(allocation.studyId, studyId));
	return new Map(rows.map(({ id, arm }) => [id, arm]));
}

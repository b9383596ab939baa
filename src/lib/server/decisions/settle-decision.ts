import { and, eq } from 'drizzle-orm';
import type { DecisionKind } from '$scheduler/policies/policy-memory';
import { hasBlockToRun } from '$lib/decisions/kind-words';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Database, Transaction } from '$lib/server/db/client';
import { decision, participant, protocolVersion, settlement } from '$lib/server/db/schema';
import { canonicalJson } from '$lib/server/record/canonical-json';
import { actorOf, recordEvent, type Actor } from '$lib/server/record/record-event';
import type { SettleInput } from '$lib/decisions/settle-input';
import { planFallback, type BlockPlanned } from './effective-block';
import { changeBlock } from './change-block';

export type Settled =
	| { ok: true }
	| {
			ok: false;
			reason: 'not-held' | 'too-late' | 'nothing-to-use' | 'out-of-bounds';
			detail?: string;
	  };

type HeldDecision = {
	id: string;
	studyId: string;
	participantId: string;
	visitNumber: number;
	blockNumber: number;
	output: string;
	readyAt: Date | null;
	kind: DecisionKind;
	trials: number;
};

/**
 * Settles a held decision: use it, change it with a reason, or run plain practice. Refused once it
 * is settled, or once its ready hour has come and the fallback holds.
 */
export async function settleDecision(
	db: Database,
	clock: Clock,
	grant: Grant<'decision:settle'>,
	{ decisionId, input }: { decisionId: string; input: SettleInput }
): Promise<Settled> {
	return db.transaction(async (tx) => {
		const held = await lockHeld(tx, grant.studyId, decisionId);
		if (!held) return { ok: false, reason: 'not-held' };
		if (held.readyAt && held.readyAt.getTime() <= clock.now())
			return { ok: false, reason: 'too-late' };
		const chosen = chooseBlock(held, input);
		if (!chosen.ok) return chosen;
		const { action, reason } = input;
		await writeSettlement(tx, clock, actorOf(grant), { held, action, reason, block: chosen.block });
		return { ok: true };
	});
}

type Chosen = { ok: true; block: BlockPlanned } | Extract<Settled, { ok: false }>;

function chooseBlock(held: HeldDecision, input: SettleInput): Chosen {
	if (input.action === 'plain-practice') return { ok: true, block: planFallback(held.trials) };
	if (!hasBlockToRun(held.kind)) return { ok: false, reason: 'nothing-to-use' };
	const own = JSON.parse(held.output) as BlockPlanned;
	const block = { kind: own.kind, parameters: own.parameters };
	if (input.action === 'use') return { ok: true, block };
	const changed = changeBlock(block, input);
	return changed.ok ? changed : { ok: false, reason: 'out-of-bounds', detail: changed.detail };
}

async function lockHeld(
	tx: Transaction,
	studyId: string,
	decisionId: string
): Promise<HeldDecision | null> {
	const [row] = await tx
		.select({ decision, content: protocolVersion.content })
		.from(decision)
		.innerJoin(participant, eq(participant.id, decision.participantId))
		.innerJoin(protocolVersion, eq(protocolVersion.id, participant.protocolVersionId))
		.where(
			and(eq(decision.id, decisionId), eq(decision.studyId, studyId), eq(decision.state, 'held'))
		)
		.for('update', { of: decision });
	if (!row) return null;
	const visit = row.content.visits.find((found) => found.number === row.decision.visitNumber);
	const planned = visit?.blocks.find((found) => found.number === row.decision.blockNumber);
	return { ...row.decision, trials: planned?.trials ?? 0 };
}

type NewSettlement = {
	held: HeldDecision;
	action: 'use' | 'change' | 'plain-practice' | 'fallback';
	reason: string;
	block: BlockPlanned;
};

async function writeSettlement(
	tx: Transaction,
	clock: Clock,
	actor: Actor,
	{ held, action, reason, block }: NewSettlement
): Promise<void> {
	await tx.insert(settlement).values({
		decisionId: held.id,
		action,
		block: canonicalJson(block),
		reason,
		settledBy: actor.kind === 'person' ? actor.personId : null,
		settledAt: new Date(clock.now())
	});
	const state = action === 'fallback' ? 'fallback' : 'settled';
	await tx.update(decision).set({ state }).where(eq(decision.id, held.id));
	await recordEvent(tx, clock, actor, {
		kind: action === 'fallback' ? 'decision-fallback' : 'decision-settled',
		item: 'decision',
		studyId: held.studyId,
		participantId: held.participantId,
		body: { decisionId: held.id, action, hasReason: reason !== '' }
	});
}

/** Issues the declared fallback for a decision that nobody settled by its ready hour. */
export async function applyFallback(
	tx: Transaction,
	clock: Clock,
	{ studyId, decisionId, reason }: { studyId: string; decisionId: string; reason: string }
): Promise<boolean> {
	const held = await lockHeld(tx, studyId, decisionId);
	if (!held) return false;
	const block = planFallback(held.trials);
	await writeSettlement(tx, clock, { kind: 'system' }, { held, action: 'fallback', reason, block });
	return true;
}

import { and, eq, isNotNull, isNull, sql } from 'drizzle-orm';
import { z } from 'zod';
import { blockParametersSchema } from '$scheduler/policies/policy-memory';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import { readEnvelope, type Envelope, type EnvelopeBreach } from '$lib/protocol/envelope';
import { findBreaches } from '$lib/protocol/find-breaches';
import type { Clock } from '$lib/server/clock';
import type { Database } from '$lib/server/db/client';
import { decision, envelopeCheck, protocolVersion, settlement } from '$lib/server/db/schema';

/** Looked at in one go; what is left comes with the next. */
const batchSize = 200;

const planSchema = z.looseObject({ kind: z.string(), parameters: blockParametersSchema });
const inputsSchema = z.looseObject({ state: z.looseObject({ trialsToday: z.number().catch(0) }) });

/**
 * Holds every decision, and every settlement, against the envelope of the version it was made by. It
 * reads what is stored, whatever wrote it: a breach is found even where the deciding code is wrong.
 *
 * @returns how many were looked at
 */
export async function checkEnvelopes(db: Database, clock: Clock): Promise<number> {
	const decided = await loadUnchecked(db, 'decision');
	const settled = await loadUnchecked(db, 'settlement');
	const envelopes = new Map<string, Envelope>();
	const values = [...decided, ...settled].map((row) => {
		const envelope = envelopes.get(row.protocolHash) ?? readEnvelope(row.content);
		envelopes.set(row.protocolHash, envelope);
		const { studyId, protocolHash, decisionId, source } = row;
		const breaches = judge(envelope, row);
		return {
			studyId,
			protocolHash,
			decisionId,
			source,
			breaches,
			checkedAt: new Date(clock.now())
		};
	});
	if (values.length > 0) await db.insert(envelopeCheck).values(values).onConflictDoNothing();
	return values.length;
}

type Unchecked = {
	studyId: string;
	protocolHash: string;
	decisionId: string;
	source: 'decision' | 'settlement';
	content: ProtocolContent;
	code: string;
	inputs: string;
	block: string;
};

async function loadUnchecked(
	db: Database,
	source: 'decision' | 'settlement'
): Promise<Unchecked[]> {
	const rows = await db
		.select({
			studyId: decision.studyId,
			protocolHash: decision.protocolHash,
			decisionId: decision.id,
			content: protocolVersion.content,
			code: decision.code,
			inputs: decision.inputs,
			output: decision.output,
			settled: settlement.block
		})
		.from(decision)
		.innerJoin(
			protocolVersion,
			and(
				eq(protocolVersion.studyId, decision.studyId),
				eq(protocolVersion.hash, decision.protocolHash)
			)
		)
		.leftJoin(settlement, eq(settlement.decisionId, decision.id))
		.leftJoin(
			envelopeCheck,
			and(eq(envelopeCheck.decisionId, decision.id), eq(envelopeCheck.source, source))
		)
		.where(
			and(
				isNull(envelopeCheck.id),
				source === 'settlement' ? isNotNull(settlement.decisionId) : sql`true`
			)
		)
		.limit(batchSize);
	return rows.map(({ output, settled, ...row }) => ({
		...row,
		source,
		block: source === 'settlement' ? (settled ?? output) : output
	}));
}

/** A block that cannot be read is a breach by itself: nobody could say what it does. */
function judge(envelope: Envelope, { block, inputs, code, source }: Unchecked): EnvelopeBreach[] {
	const plan = planSchema.safeParse(readJson(block));
	if (!plan.success) return [{ limit: 'readable block', approved: 1, found: 0, unit: '' }];
	const { kind, parameters } = plan.data;
	const trialsBefore = inputsSchema.safeParse(readJson(inputs)).data?.state.trialsToday ?? 0;
	const isListed = source === 'decision' && code === 'PROTOCOL-BLOCK';
	return findBreaches(envelope, { kind, parameters, trialsBefore, isListed });
}

function readJson(text: string): unknown {
	try {
		return JSON.parse(text);
	} catch {
		return null;
	}
}

import { and, eq, isNull } from 'drizzle-orm';
import type { AmendmentTerms } from '$lib/protocol/amendment';
import type { Fault } from '$lib/protocol/fault';
import { findFreezeFaults } from '$lib/protocol/findings';
import { readContent } from '$lib/protocol/read-content';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Database, Transaction } from '$lib/server/db/client';
import { protocolVersion } from '$lib/server/db/schema';
import { canonicalJson, sha256Hex } from '$lib/server/record/canonical-json';
import { actorOf, recordEvent } from '$lib/server/record/record-event';
import { declareAmendment, type AmendmentRefusal } from './declare-amendment';
import { loadDraftContent } from './draft-content';
import { findDraftRow, findFrozenVersions } from './find-versions';
import { findTeamClashes, isTeamRefusal, type TeamClash } from './find-team-clashes';
import { loadRigLimits } from './load-draft';

export type FreezeInput = {
	number: number;
	revision: number;
	/** Why, in the words of who freezes. */
	reason: string;
	/** Only where a version runs already; without it nobody in flight is moved over. */
	amendment?: AmendmentTerms | undefined;
};

export type FreezeRefusal =
	| { ok: false; reason: 'no-draft' | 'stale' | 'unchanged' }
	| { ok: false; reason: 'faults'; faults: Fault[] }
	/** Somebody of the team holds or held roles that the version's exceptions forbid. */
	| { ok: false; reason: 'team'; clashes: TeamClash[] }
	| AmendmentRefusal;

export type FreezeOutcome = { ok: true; number: number; hash: string } | FreezeRefusal;

/** Thrown to undo the transaction with an answer. */
class Refused extends Error {
	constructor(readonly refusal: FreezeRefusal) {
		super(refusal.reason);
	}
}

/**
 * Freezes the draft: from now on it is one document under one hash, and can never change. Refused
 * with every fault named, and when the draft is no longer the one that the person saw.
 */
export async function freezeVersion(
	db: Database,
	clock: Clock,
	grant: Grant<'protocol:freeze'>,
	input: FreezeInput
): Promise<FreezeOutcome> {
	let variants: string[] = [];
	try {
		return await db.transaction(async (tx) => {
			return freezeOnce(tx, clock, grant, input, (declared) => (variants = declared));
		});
	} catch (error) {
		if (error instanceof Refused) return error.refusal;
		if (!isTeamRefusal(error)) throw error;
		const clashes = await findTeamClashes(db, grant, variants);
		return { ok: false, reason: 'team', clashes };
	}
}

async function freezeOnce(
	tx: Transaction,
	clock: Clock,
	grant: Grant<'protocol:freeze'>,
	input: FreezeInput,
	onVariants: (variants: string[]) => void
): Promise<FreezeOutcome> {
	const { studyId, personId } = grant;
	const { number, revision, reason } = input;
	const row = await findDraftRow(tx, studyId);
	if (row?.number !== number) return { ok: false, reason: 'no-draft' };
	const { content, hash } = await readFinished(tx, grant, row.content);
	onVariants(content.variants);
	const frozen = await tx
		.update(protocolVersion)
		.set({ content, hash, reason, frozenAt: new Date(clock.now()), frozenBy: personId })
		.where(
			and(
				eq(protocolVersion.id, row.id),
				eq(protocolVersion.revision, revision),
				isNull(protocolVersion.hash)
			)
		)
		.returning({ id: protocolVersion.id });
	if (frozen.length === 0) return { ok: false, reason: 'stale' };
	if (input.amendment) {
		const terms = input.amendment;
		const refusal = await declareAmendment(tx, clock, grant, { versionId: row.id, content, terms });
		if (refusal) throw new Refused(refusal);
	}
	await recordEvent(tx, clock, actorOf(grant), {
		kind: 'protocol-frozen',
		item: 'protocol-text',
		studyId,
		body: { number, hash, ...(input.amendment ? { amendment: input.amendment } : {}) }
	});
	return { ok: true, number, hash };
}

/** The draft as the document that is frozen, with its hash; refused with everything that is wrong. */
async function readFinished(
	tx: Transaction,
	grant: Grant<'protocol:freeze'>,
	stored: Parameters<typeof loadDraftContent>[0]
) {
	const draft = loadDraftContent(stored);
	const blocking = findFreezeFaults(draft, await loadRigLimits(tx, grant.labId));
	if (blocking.length > 0) throw new Refused({ ok: false, reason: 'faults', faults: blocking });
	const read = readContent(draft);
	if (!read.ok) throw new Refused({ ok: false, reason: 'faults', faults: read.faults });
	const hash = sha256Hex(canonicalJson(read.content));
	const [last] = await findFrozenVersions(tx, grant.studyId);
	if (last?.hash === hash) throw new Refused({ ok: false, reason: 'unchanged' });
	return { content: read.content, hash };
}

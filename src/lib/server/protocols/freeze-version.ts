import { and, eq, isNull } from 'drizzle-orm';
import type { Fault } from '$lib/protocol/fault';
import { findFaults } from '$lib/protocol/find-faults';
import { readContent } from '$lib/protocol/read-content';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Database } from '$lib/server/db/client';
import { protocolVersion } from '$lib/server/db/schema';
import { canonicalJson, sha256Hex } from '$lib/server/record/canonical-json';
import { actorOf, recordEvent } from '$lib/server/record/record-event';
import { loadDraftContent } from './draft-content';
import { findDraftRow, findFrozenVersions } from './find-versions';
import { loadRigLimits } from './load-draft';

export type FreezeOutcome =
	| { ok: true; number: number; hash: string }
	| { ok: false; reason: 'no-draft' | 'stale' | 'unchanged' }
	| { ok: false; reason: 'faults'; faults: Fault[] };

/**
 * Freezes the draft: from now on it is one document under one hash, and can never change. Refused
 * with every fault named, and when the draft is no longer the one that the person saw.
 */
export async function freezeVersion(
	db: Database,
	clock: Clock,
	grant: Grant<'protocol:freeze'>,
	{ number, revision }: { number: number; revision: number }
): Promise<FreezeOutcome> {
	const { studyId, personId, labId } = grant;
	return db.transaction(async (tx): Promise<FreezeOutcome> => {
		const row = await findDraftRow(tx, studyId);
		if (row?.number !== number) return { ok: false, reason: 'no-draft' };
		const draft = loadDraftContent(row.content);
		const faults = findFaults(draft, await loadRigLimits(tx, labId));
		const blocking = faults.filter(({ level }) => level === 'fault');
		if (blocking.length > 0) return { ok: false, reason: 'faults', faults: blocking };
		const read = readContent(draft);
		if (!read.ok) return { ok: false, reason: 'faults', faults: read.faults };
		const { content } = read;
		const hash = sha256Hex(canonicalJson(content));
		const [last] = await findFrozenVersions(tx, studyId);
		if (last?.hash === hash) return { ok: false, reason: 'unchanged' };
		const frozen = await tx
			.update(protocolVersion)
			.set({ content, hash, frozenAt: new Date(clock.now()), frozenBy: personId })
			.where(
				and(
					eq(protocolVersion.id, row.id),
					eq(protocolVersion.revision, revision),
					isNull(protocolVersion.hash)
				)
			)
			.returning({ id: protocolVersion.id });
		if (frozen.length === 0) return { ok: false, reason: 'stale' };
		await recordEvent(tx, clock, actorOf(grant), {
			kind: 'protocol-frozen',
			item: 'protocol-text',
			studyId,
			body: { number, hash }
		});
		return { ok: true, number, hash };
	});
}

import type { EthicsApprovalInput } from '$lib/protocol/ethics-approval';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Database } from '$lib/server/db/client';
import { ethicsApproval } from '$lib/server/db/schema';
import { findFrozenVersions } from '$lib/server/protocols/find-versions';
import { actorOf, recordEvent } from '$lib/server/record/record-event';
import { loadStudyZone } from '$lib/server/studies/load-study-zone';
import { localDateOf } from '$lib/time/wall-clock';

export type RecordApprovalOutcome =
	| { ok: true; versionNumber: number }
	| { ok: false; reason: 'unknown-version' | 'not-yet-given' | 'already-expired' };

/** Records an ethics approval that names one frozen version; a renewal is another approval. */
export async function recordApproval(
	db: Database,
	clock: Clock,
	grant: Grant<'ethics:record'>,
	input: EthicsApprovalInput
): Promise<RecordApprovalOutcome> {
	const { studyId, personId } = grant;
	return db.transaction(async (tx): Promise<RecordApprovalOutcome> => {
		const versions = await findFrozenVersions(tx, studyId);
		const version = versions.find(({ hash }) => hash === input.protocolHash);
		if (!version) return { ok: false, reason: 'unknown-version' };
		const today = localDateOf(clock.now(), await loadStudyZone(tx, studyId));
		if (input.approvedOn > today) return { ok: false, reason: 'not-yet-given' };
		if (input.expiresOn < today) return { ok: false, reason: 'already-expired' };
		const recordedAt = new Date(clock.now());
		await tx.insert(ethicsApproval).values({ ...input, studyId, recordedBy: personId, recordedAt });
		await recordEvent(tx, clock, actorOf(grant), {
			kind: 'ethics-approval-recorded',
			item: 'protocol-text',
			studyId,
			body: input
		});
		return { ok: true, versionNumber: version.number };
	});
}

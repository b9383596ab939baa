import { sql } from 'drizzle-orm';
import { createPatternDraft } from '$lib/protocol/patterns';
import { writeDraft } from '$lib/protocol/write-draft';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Database } from '$lib/server/db/client';
import { protocolVersion } from '$lib/server/db/schema';
import { actorOf, recordEvent } from '$lib/server/record/record-event';
import { storeDraft } from './draft-content';
import { findDraftRow, findFrozenVersions } from './find-versions';

export type StartDraftOutcome =
	{ ok: true; number: number } | { ok: false; reason: 'draft-exists' | 'nothing-frozen' };

/** Starts the next version as a draft that equals the newest frozen one. */
export async function startDraft(
	db: Database,
	clock: Clock,
	grant: Grant<'protocol:edit'>
): Promise<StartDraftOutcome> {
	const { studyId } = grant;
	return db.transaction(async (tx): Promise<StartDraftOutcome> => {
		await tx.execute(sql`select pg_advisory_xact_lock(hashtext(${`protocol-draft:${studyId}`}))`);
		if (await findDraftRow(tx, studyId)) return { ok: false, reason: 'draft-exists' };
		const [last] = await findFrozenVersions(tx, studyId);
		if (!last) return { ok: false, reason: 'nothing-frozen' };
		const draft = writeDraft(last.content, createPatternDraft('blank'));
		const number = last.number + 1;
		const createdAt = new Date(clock.now());
		await tx
			.insert(protocolVersion)
			.values({ studyId, number, content: storeDraft(draft), createdAt });
		await recordEvent(tx, clock, actorOf(grant), {
			kind: 'protocol-draft-started',
			item: 'protocol-text',
			studyId,
			body: { number, fromHash: last.hash }
		});
		return { ok: true, number };
	});
}

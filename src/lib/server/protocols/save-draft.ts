import { and, eq, isNull } from 'drizzle-orm';
import { assumptionFields, type ProtocolDraft } from '$lib/protocol/protocol-draft';
import { findUnsavable } from '$lib/protocol/limits/find-envelope-faults';
import type { Grant } from '$lib/server/access/require-permission';
import type { Database, Queryable } from '$lib/server/db/client';
import { protocolVersion } from '$lib/server/db/schema';
import { loadDraftContent, storeDraft } from './draft-content';
import { findDraftRow } from './find-versions';
import { loadRigLimits } from './load-draft';

export type SaveDraftInput = { number: number; revision: number; draft: ProtocolDraft };

export type SaveDraftOutcome =
	| { ok: true; revision: number; enteredBy: Record<string, string> }
	/** Somebody else saved meanwhile; `draft` is what stands now. */
	| { ok: false; reason: 'stale'; revision: number; draft: ProtocolDraft }
	| { ok: false; reason: 'no-draft' }
	/** Limits out of their range, or above what the lab's rigs allow. */
	| { ok: false; reason: 'out-of-range'; faults: string[] };

/** Saves the draft if it is still the one that was loaded; a stale save changes nothing. */
export async function saveDraft(
	db: Database,
	grant: Grant<'protocol:edit'>,
	input: SaveDraftInput
): Promise<SaveDraftOutcome> {
	return db.transaction(async (tx): Promise<SaveDraftOutcome> => {
		const unsavable = findUnsavable(input.draft, await loadRigLimits(tx, grant.labId));
		if (unsavable.length > 0) {
			const faults = unsavable.map(({ text, remedy }) => `${text} ${remedy}`);
			return { ok: false, reason: 'out-of-range', faults };
		}
		const row = await findDraftRow(tx, grant.studyId);
		if (row?.number !== input.number) return { ok: false, reason: 'no-draft' };
		const before = loadDraftContent(row.content);
		const draft = nameAuthors(input.draft, before, grant.personName);
		const saved = await writeDraftRow(tx, { id: row.id, revision: input.revision, draft });
		if (saved) {
			return { ok: true, revision: saved.revision, enteredBy: draft.comparison.enteredBy };
		}
		const current = (await findDraftRow(tx, grant.studyId)) ?? row;
		const { revision, content } = current;
		return { ok: false, reason: 'stale', revision, draft: loadDraftContent(content) };
	});
}

async function writeDraftRow(
	tx: Queryable,
	{ id, revision, draft }: { id: string; revision: number; draft: ProtocolDraft }
) {
	const [saved] = await tx
		.update(protocolVersion)
		.set({ content: storeDraft(draft), revision: revision + 1 })
		.where(
			and(
				eq(protocolVersion.id, id),
				eq(protocolVersion.revision, revision),
				isNull(protocolVersion.hash)
			)
		)
		.returning({ revision: protocolVersion.revision });
	return saved;
}

/** Keeps who entered each assumption last; whoever changes a value or its source becomes its author. */
function nameAuthors(draft: ProtocolDraft, before: ProtocolDraft, author: string): ProtocolDraft {
	const enteredBy = { ...before.comparison.enteredBy };
	for (const field of assumptionFields) {
		const [now, was] = [readAssumption(draft, field), readAssumption(before, field)];
		if (now !== was) enteredBy[field] = author;
	}
	return { ...draft, comparison: { ...draft.comparison, enteredBy } };
}

function readAssumption(
	{ comparison }: ProtocolDraft,
	field: (typeof assumptionFields)[number]
): string {
	const sources: Partial<Record<typeof field, string>> = {
		effectD: comparison.effectSource,
		peopleLostShare: comparison.peopleLostSource,
		effectLostShare: comparison.effectLostSource
	};
	return `${comparison[field]}\n${sources[field] ?? ''}`;
}

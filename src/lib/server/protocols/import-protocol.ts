import { and, eq, isNull, sql } from 'drizzle-orm';
import { listLosses, readExport } from '$lib/protocol/exported-protocol';
import { createPatternDraft } from '$lib/protocol/patterns';
import { readContent } from '$lib/protocol/read-content';
import { writeDraft } from '$lib/protocol/write-draft';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Database, Transaction } from '$lib/server/db/client';
import { protocolVersion } from '$lib/server/db/schema';
import { canonicalJson, sha256Hex } from '$lib/server/record/canonical-json';
import { actorOf, recordEvent } from '$lib/server/record/record-event';
import { storeDraft } from './draft-content';
import { findDraftRow, findFrozenVersions } from './find-versions';

export type ImportOutcome =
	| { ok: true; number: number }
	| { ok: false; reason: 'not-json' | 'draft-exists' }
	| { ok: false; reason: 'not-a-protocol' | 'not-holdable'; faults: string[] }
	| { ok: false; reason: 'hash-differs'; stated: string; found: string };

/**
 * Imports an exported version as the draft of this study. Nothing is imported in part: the draft, read
 * back, must be the very document of the file.
 */
export async function importProtocol(
	db: Database,
	clock: Clock,
	grant: Grant<'protocol:edit'>,
	{ text, replaceDraft }: { text: string; replaceDraft: boolean }
): Promise<ImportOutcome> {
	const read = readExport(text);
	if (!read.ok) return read;
	const { content, hash } = read.exported;
	const found = sha256Hex(canonicalJson(content));
	if (found !== hash) return { ok: false, reason: 'hash-differs', stated: hash, found };
	const draft = writeDraft(content, createPatternDraft('blank'));
	const back = readContent(draft);
	if (!back.ok) {
		const faults = back.faults.map(({ place, text: words }) => `${place}: ${words}`);
		return { ok: false, reason: 'not-holdable', faults };
	}
	const losses = listLosses(content, back.content);
	if (losses.length > 0) return { ok: false, reason: 'not-holdable', faults: losses };
	return db.transaction(async (tx): Promise<ImportOutcome> => {
		const { studyId } = grant;
		await tx.execute(sql`select pg_advisory_xact_lock(hashtext(${`protocol-draft:${studyId}`}))`);
		const number = await storeImported(tx, clock, { studyId, draft, replaceDraft });
		if (number === null) return { ok: false, reason: 'draft-exists' };
		await recordEvent(tx, clock, actorOf(grant), {
			kind: 'protocol-imported',
			item: 'protocol-text',
			studyId,
			body: { number, fromHash: hash }
		});
		return { ok: true, number };
	});
}

type Imported = {
	studyId: string;
	draft: Parameters<typeof storeDraft>[0];
	replaceDraft: boolean;
};

/** The number of the draft it became; null where one is being written that may not be replaced. */
async function storeImported(
	tx: Transaction,
	clock: Clock,
	{ studyId, draft, replaceDraft }: Imported
): Promise<number | null> {
	const row = await findDraftRow(tx, studyId);
	if (row && !replaceDraft) return null;
	if (row) {
		await tx
			.update(protocolVersion)
			.set({ content: storeDraft(draft), revision: row.revision + 1 })
			.where(and(eq(protocolVersion.id, row.id), isNull(protocolVersion.hash)));
		return row.number;
	}
	const [last] = await findFrozenVersions(tx, studyId);
	const number = (last?.number ?? 0) + 1;
	const createdAt = new Date(clock.now());
	await tx.insert(protocolVersion).values({
		...{ studyId, number, createdAt },
		content: storeDraft(draft)
	});
	return number;
}

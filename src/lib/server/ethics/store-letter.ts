import { and, eq } from 'drizzle-orm';
import { findLetterType, letterMaxBytes } from '$lib/protocol/letter-type';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Database } from '$lib/server/db/client';
import { ethicsApproval, ethicsLetter } from '$lib/server/db/schema';
import { sha256Hex } from '$lib/server/record/canonical-json';
import { actorOf, recordEvent } from '$lib/server/record/record-event';

export type LetterInput = { approvalId: string; fileName: string; content: Uint8Array };
export type StoreLetterOutcome =
	| { ok: true; sha256: string }
	| {
			ok: false;
			reason: 'empty' | 'too-large' | 'unknown-kind' | 'no-such-approval' | 'kept-already';
	  };

/** Keeps the letter of an approval as it came. It is never changed: another letter is another row. */
export async function storeLetter(
	db: Database,
	clock: Clock,
	grant: Grant<'ethics:record'>,
	{ approvalId, fileName, content }: LetterInput
): Promise<StoreLetterOutcome> {
	if (content.length === 0) return { ok: false, reason: 'empty' };
	if (content.length > letterMaxBytes) return { ok: false, reason: 'too-large' };
	const mediaType = findLetterType(content);
	if (!mediaType) return { ok: false, reason: 'unknown-kind' };
	const { studyId, personId } = grant;
	const sha256 = sha256Hex(content);
	return db.transaction(async (tx): Promise<StoreLetterOutcome> => {
		const [approval] = await tx
			.select({ hash: ethicsApproval.protocolHash })
			.from(ethicsApproval)
			.where(and(eq(ethicsApproval.id, approvalId), eq(ethicsApproval.studyId, studyId)));
		if (!approval) return { ok: false, reason: 'no-such-approval' };
		const kept = await tx
			.insert(ethicsLetter)
			.values({
				studyId,
				approvalId,
				fileName: cleanName(fileName),
				mediaType,
				byteCount: content.length,
				sha256,
				content,
				addedBy: personId,
				addedAt: new Date(clock.now())
			})
			.onConflictDoNothing()
			.returning({ id: ethicsLetter.id });
		if (kept.length === 0) return { ok: false, reason: 'kept-already' };
		await recordEvent(tx, clock, actorOf(grant), {
			kind: 'ethics-letter-kept',
			item: 'protocol-text',
			studyId,
			body: { approvalId, protocolHash: approval.hash, sha256, byteCount: content.length }
		});
		return { ok: true, sha256 };
	});
}

/** The last part of a path, without what a header or a screen could trip over. */
function cleanName(name: string): string {
	const last = name.split(/[/\\]/).at(-1) ?? '';
	const clean = last.replace(/[\p{C}"]/gu, '').trim();
	return clean.slice(-200) || 'letter';
}

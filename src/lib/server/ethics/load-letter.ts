import { and, eq } from 'drizzle-orm';
import type { LetterType } from '$lib/protocol/letter-type';
import type { Grant } from '$lib/server/access/require-permission';
import type { Queryable } from '$lib/server/db/client';
import { ethicsLetter } from '$lib/server/db/schema';
import { sha256Hex } from '$lib/server/record/canonical-json';

export type Letter = {
	fileName: string;
	mediaType: LetterType;
	content: Uint8Array;
	sha256: string;
};

/**
 * A letter of the study as it was kept; null when there is none with this id.
 *
 * @throws {Error} bytes that no longer have the checksum they were kept with
 */
export async function loadLetter(
	db: Queryable,
	grant: Grant<'ethics:read'>,
	letterId: string
): Promise<Letter | null> {
	const [row] = await db
		.select()
		.from(ethicsLetter)
		.where(and(eq(ethicsLetter.id, letterId), eq(ethicsLetter.studyId, grant.studyId)));
	if (!row) return null;
	const { fileName, mediaType, content, sha256 } = row;
	if (sha256Hex(content) !== sha256)
		throw new Error('a letter is not what it was when it was kept');
	return { fileName, mediaType, content, sha256 };
}

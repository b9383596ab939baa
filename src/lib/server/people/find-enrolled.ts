import { and, eq, inArray } from 'drizzle-orm';
import type { Queryable } from '$lib/server/db/client';
import { contact, participant } from '$lib/server/db/schema';

/**
 * Which of these addresses (by blind index, hexadecimal) belong to somebody of the study already,
 * and to which code. The addresses themselves are never compared.
 */
export async function findEnrolled(
	db: Queryable,
	studyId: string,
	emailIndexes: readonly string[]
): Promise<Map<string, string>> {
	if (emailIndexes.length === 0) return new Map();
	const wanted = emailIndexes.map((index) => new Uint8Array(Buffer.from(index, 'hex')));
	const rows = await db
		.select({ emailIndex: contact.emailIndex, code: participant.code })
		.from(contact)
		.innerJoin(participant, eq(participant.id, contact.participantId))
		.where(and(eq(contact.studyId, studyId), inArray(contact.emailIndex, wanted)));
	return new Map(rows.map((row) => [Buffer.from(row.emailIndex).toString('hex'), row.code]));
}

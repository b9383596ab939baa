import { and, eq } from 'drizzle-orm';
import { z } from 'zod';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Database, Queryable } from '$lib/server/db/client';
import { contact, participant } from '$lib/server/db/schema';
import type { PeopleKeys } from '$lib/server/keys/people-keys';
import { actorOf, recordEvent } from '$lib/server/record/record-event';

const contactSchema = z.object({
	name: z.string(),
	email: z.string(),
	phone: z.string().default('')
});
export type ContactDetails = z.infer<typeof contactSchema>;

/** Somebody's contact data, or that it was erased with their key. */
export type Contact = {
	participantId: string;
	code: string;
	withdrawn: boolean;
	details: ContactDetails | null;
};

/** Opens everybody's contact data, or one person's, and records that it was opened and by whom. */
export async function openContacts(
	db: Database,
	clock: Clock,
	grant: Grant<'participant:list'>,
	{ keys, participantId }: { keys: PeopleKeys; participantId?: string }
): Promise<Contact[]> {
	const rows = await db
		.select({
			participantId: participant.id,
			code: participant.code,
			withdrawnAt: participant.withdrawnAt,
			sealed: contact.sealed
		})
		.from(participant)
		.innerJoin(contact, eq(contact.participantId, participant.id))
		.where(
			and(
				eq(participant.studyId, grant.studyId),
				participantId ? eq(participant.id, participantId) : undefined
			)
		)
		.orderBy(participant.number);
	const opened: Contact[] = [];
	for (const { sealed, withdrawnAt, ...row } of rows) {
		const details = await readContact(keys, row.participantId, sealed);
		opened.push({ ...row, withdrawn: withdrawnAt !== null, details });
	}
	await recordOpening(db, clock, grant, { count: opened.length, participantId });
	return opened;
}

async function readContact(
	keys: PeopleKeys,
	participantId: string,
	sealed: Uint8Array
): Promise<ContactDetails | null> {
	const read = await keys.folder.readText(participantId, sealed);
	return read.ok ? contactSchema.parse(JSON.parse(read.text)) : null;
}

async function recordOpening(
	db: Queryable,
	clock: Clock,
	grant: Grant,
	{ count, participantId }: { count: number; participantId?: string | undefined }
): Promise<void> {
	await recordEvent(db, clock, actorOf(grant), {
		kind: 'contact-opened',
		item: 'contact',
		labId: grant.labId,
		studyId: grant.studyId,
		participantId,
		body: { count }
	});
}

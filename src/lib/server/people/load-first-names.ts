import { inArray } from 'drizzle-orm';
import type { Queryable } from '$lib/server/db/client';
import { contact } from '$lib/server/db/schema';
import type { PeopleKeys } from '$lib/server/keys/people-keys';

/**
 * First names of participants, and nothing else of their contact data: for the operator, who must
 * greet the right person. Somebody whose data was erased has none.
 */
export async function loadFirstNames(
	db: Queryable,
	keys: PeopleKeys,
	participantIds: readonly string[]
): Promise<Map<string, string>> {
	if (participantIds.length === 0) return new Map();
	const rows = await db
		.select({ participantId: contact.participantId, sealed: contact.sealed })
		.from(contact)
		.where(inArray(contact.participantId, [...participantIds]));
	const names = new Map<string, string>();
	for (const { participantId, sealed } of rows) {
		const opened = await openName(keys, participantId, sealed);
		if (opened) names.set(participantId, opened);
	}
	return names;
}

/** Null for somebody who was erased: their code is all there is. */
async function openName(
	keys: PeopleKeys,
	participantId: string,
	sealed: Uint8Array
): Promise<string | null> {
	const opened = await keys.folder.readText(participantId, sealed);
	if (!opened.ok) return null;
	const { name } = JSON.parse(opened.text) as { name?: unknown };
	return typeof name === 'string' ? (name.trim().split(/\s+/)[0] ?? null) : null;
}

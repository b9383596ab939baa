import { and, eq, isNull } from 'drizzle-orm';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import { membership, person } from '$lib/server/db/schema';
import { normalizeEmail } from '$lib/members/normalize-email';

export type Member = { id: string; name: string; email: string };

/** The person with this address who belongs to at least one lab now; null when there is none. */
export async function findMemberByEmail(db: Queryable, email: string): Promise<Member | null> {
	const [row] = await db
		.select({ id: person.id, name: person.name, email: person.email })
		.from(person)
		.innerJoin(membership, eq(membership.personId, person.id))
		.where(and(eq(person.email, normalizeEmail(email)), isNull(membership.endedAt)))
		.limit(1);
	return row ? { ...row, name: row.name ?? row.email } : null;
}

/** Marks the person's invitations as accepted at their first sign-in. */
export async function acceptMemberships(db: Queryable, clock: Clock, email: string): Promise<void> {
	const member = await findMemberByEmail(db, email);
	if (!member) return;
	await db
		.update(membership)
		.set({ acceptedAt: new Date(clock.now()) })
		.where(and(eq(membership.personId, member.id), isNull(membership.acceptedAt)));
}

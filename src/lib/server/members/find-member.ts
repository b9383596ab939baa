import { and, eq, isNull, sql } from 'drizzle-orm';
import type { Queryable } from '$lib/server/db/client';
import { membership, person } from '$lib/server/db/schema';

export type Member = { id: string; name: string; email: string };

/** The person with this address who belongs to at least one lab now; null when there is none. */
export async function findMemberByEmail(db: Queryable, email: string): Promise<Member | null> {
	const [row] = await db
		.select({ id: person.id, name: person.name, email: person.email })
		.from(person)
		.innerJoin(membership, eq(membership.personId, person.id))
		.where(and(sql`lower(${person.email}) = lower(${email})`, isNull(membership.endedAt)))
		.limit(1);
	return row ? { ...row, name: row.name ?? row.email } : null;
}

/** Marks the person's invitations as accepted at their first sign-in. */
export async function acceptMemberships(db: Queryable, email: string): Promise<void> {
	const member = await findMemberByEmail(db, email);
	if (!member) return;
	await db
		.update(membership)
		.set({ acceptedAt: sql`now()` })
		.where(and(eq(membership.personId, member.id), isNull(membership.acceptedAt)));
}

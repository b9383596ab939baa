import { and, asc, eq, isNull } from 'drizzle-orm';
import type { Grant } from '$lib/server/access/require-permission';
import type { Queryable } from '$lib/server/db/client';
import { account, lab, membership, person } from '$lib/server/db/schema';

export type OwnAccount = {
	name: string;
	email: string;
	labs: { id: string; name: string; zone: string; isSteward: boolean }[];
	/** Whether the university's sign-on has been used for this account. */
	hasSignOn: boolean;
};

export async function loadAccount(
	db: Queryable,
	grant: Grant<'account:manage'>
): Promise<OwnAccount> {
	const [own] = await db
		.select({ name: person.name, email: person.email })
		.from(person)
		.where(eq(person.id, grant.personId));
	if (!own) throw new Error('the person of a grant exists');
	const labs = await db
		.select({ id: lab.id, name: lab.name, zone: lab.zone, isSteward: membership.isSteward })
		.from(membership)
		.innerJoin(lab, eq(lab.id, membership.labId))
		.where(and(eq(membership.personId, grant.personId), isNull(membership.endedAt)))
		.orderBy(asc(lab.name));
	const signOns = await db
		.select({ provider: account.provider })
		.from(account)
		.where(eq(account.userId, grant.personId));
	return { name: own.name ?? '', email: own.email, labs, hasSignOn: signOns.length > 0 };
}

export async function changeOwnName(
	db: Queryable,
	grant: Grant<'account:manage'>,
	name: string
): Promise<void> {
	await db.update(person).set({ name }).where(eq(person.id, grant.personId));
}

import { and, asc, eq, isNull } from 'drizzle-orm';
import type { Grant } from '$lib/server/access/require-permission';
import type { Queryable } from '$lib/server/db/client';
import { membership, person, study, studyRole, type StudyRole } from '$lib/server/db/schema';

export type MemberView = {
	personId: string;
	name: string;
	email: string;
	isSteward: boolean;
	since: Date;
	/** Null until their first sign-in. */
	acceptedAt: Date | null;
	parts: { studyTitle: string; role: StudyRole }[];
};

/** Present members of the lab by name, with their parts in its studies. */
export async function listMembers(
	db: Queryable,
	grant: Grant<'lab:manage'>
): Promise<MemberView[]> {
	const rows = await db
		.select({
			personId: person.id,
			name: person.name,
			email: person.email,
			isSteward: membership.isSteward,
			since: membership.since,
			acceptedAt: membership.acceptedAt
		})
		.from(membership)
		.innerJoin(person, eq(person.id, membership.personId))
		.where(and(eq(membership.labId, grant.labId), isNull(membership.endedAt)))
		.orderBy(asc(person.name), asc(person.email));
	const parts = await db
		.select({ personId: studyRole.personId, role: studyRole.role, studyTitle: study.workingTitle })
		.from(studyRole)
		.innerJoin(study, eq(study.id, studyRole.studyId))
		.where(and(eq(study.labId, grant.labId), isNull(studyRole.endedAt)))
		.orderBy(asc(study.workingTitle), asc(studyRole.role));
	return rows.map((row) => ({
		...row,
		name: row.name ?? row.email,
		parts: parts
			.filter((part) => part.personId === row.personId)
			.map(({ role, studyTitle }) => ({ role, studyTitle }))
	}));
}

/** Present members by name, for choosing one. */
export async function listMemberNames(
	db: Queryable,
	labId: string
): Promise<{ id: string; name: string }[]> {
	const rows = await db
		.select({ id: person.id, name: person.name, email: person.email })
		.from(membership)
		.innerJoin(person, eq(person.id, membership.personId))
		.where(and(eq(membership.labId, labId), isNull(membership.endedAt)))
		.orderBy(asc(person.name), asc(person.email));
	return rows.map(({ id, name, email }) => ({ id, name: name ?? email }));
}

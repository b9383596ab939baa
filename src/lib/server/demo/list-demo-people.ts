import { and, asc, eq, isNull } from 'drizzle-orm';
import type { Queryable } from '$lib/server/db/client';
import { lab, membership, person, study, studyRole, type StudyRole } from '$lib/server/db/schema';
import { seesArms } from '$lib/server/access/visibility';
import { roleOrder } from '$lib/members/role-names';
import type { DemoGrant } from './require-demo';

export type DemoPerson = {
	id: string;
	name: string;
	labName: string;
	isSteward: boolean;
	parts: { role: StudyRole; studyTitle: string; isWaiting: boolean }[];
};

/** Everybody who can be entered as: the members of every lab, stewards first, then by role. */
export async function listDemoPeople(db: Queryable, _grant: DemoGrant): Promise<DemoPerson[]> {
	const members = await db
		.select({
			id: person.id,
			name: person.name,
			email: person.email,
			labName: lab.name,
			labId: lab.id,
			isSteward: membership.isSteward
		})
		.from(membership)
		.innerJoin(person, eq(person.id, membership.personId))
		.innerJoin(lab, eq(lab.id, membership.labId))
		.where(isNull(membership.endedAt))
		.orderBy(asc(person.name), asc(person.email));
	const roles = await db
		.select({ row: studyRole, studyTitle: study.workingTitle, labId: study.labId })
		.from(studyRole)
		.innerJoin(study, eq(study.id, studyRole.studyId))
		.where(isNull(studyRole.endedAt))
		.orderBy(asc(study.createdAt));
	return members
		.map(({ labId, email, name, ...member }) => ({
			...member,
			name: name ?? email,
			parts: roles
				.filter(({ row, labId: ofLab }) => row.personId === member.id && ofLab === labId)
				.map(({ row, studyTitle }) => ({
					role: row.role,
					studyTitle,
					isWaiting: seesArms(row.role) && !row.confirmedBy
				}))
		}))
		.toSorted((a, b) => rank(a) - rank(b));
}

function rank(one: DemoPerson): number {
	if (one.isSteward) return -1;
	const ranks = one.parts.map(({ role }) => roleOrder.indexOf(role));
	return Math.min(roleOrder.length, ...ranks);
}

/** Whether this person is one of them. */
export async function isDemoPerson(
	db: Queryable,
	_grant: DemoGrant,
	personId: string
): Promise<boolean> {
	const [row] = await db
		.select({ id: membership.id })
		.from(membership)
		.where(and(eq(membership.personId, personId), isNull(membership.endedAt)))
		.limit(1);
	return row !== undefined;
}

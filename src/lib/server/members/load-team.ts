import { and, asc, eq, isNull } from 'drizzle-orm';
import { alias } from 'drizzle-orm/pg-core';
import { loadVariants, type Grant } from '$lib/server/access/require-permission';
import { findForbiddenPartner, seesArms } from '$lib/server/access/visibility';
import type { Queryable } from '$lib/server/db/client';
import { membership, person, studyRole, type StudyRole } from '$lib/server/db/schema';
import { roleOrder } from '$lib/members/role-names';
import { listMemberNames } from './list-members';

export type TeamRole = {
	id: string;
	personId: string;
	personName: string;
	role: StudyRole;
	givenByName: string;
	givenAt: Date;
	/** waiting: given, but it counts only once a second person has confirmed it. */
	state: 'counts' | 'waiting' | 'ended';
	confirmedByName: string | null;
	endedAt: Date | null;
	/** Whether the person who looks may be the second person. */
	mayConfirm: boolean;
	/** While it waits: everybody who could confirm it, by name. */
	secondPeople: string[];
};

type TeamGrant = Grant<'team:read'>;

/** Every role of the study that was ever given, in the order of the roles, then of time. */
export async function loadTeam(db: Queryable, grant: TeamGrant): Promise<TeamRole[]> {
	const giver = alias(person, 'giver');
	const second = alias(person, 'second');
	const rows = await db
		.select({
			row: studyRole,
			name: person.name,
			email: person.email,
			giverName: giver.name,
			secondName: second.name
		})
		.from(studyRole)
		.innerJoin(person, eq(person.id, studyRole.personId))
		.innerJoin(giver, eq(giver.id, studyRole.givenBy))
		.leftJoin(second, eq(second.id, studyRole.confirmedBy))
		.where(eq(studyRole.studyId, grant.studyId))
		.orderBy(asc(studyRole.givenAt));
	const able = await listSecondPeople(db, grant);
	return rows
		.map(({ row, name, email, giverName, secondName }) => ({
			id: row.id,
			personId: row.personId,
			personName: name ?? email,
			role: row.role,
			givenByName: giverName ?? 'somebody',
			givenAt: row.givenAt,
			state: stateOf(row),
			confirmedByName: secondName,
			endedAt: row.endedAt,
			mayConfirm: stateOf(row) === 'waiting' && mayBeSecond(grant.personId, row),
			secondPeople:
				stateOf(row) === 'waiting'
					? able.filter(({ id }) => mayBeSecond(id, row)).map((one) => one.name)
					: []
		}))
		.toSorted((a, b) => roleOrder.indexOf(a.role) - roleOrder.indexOf(b.role));
}

type Row = typeof studyRole.$inferSelect;

function stateOf(row: Row): TeamRole['state'] {
	if (row.endedAt) return 'ended';
	return seesArms(row.role) && !row.confirmedBy ? 'waiting' : 'counts';
}

/** Neither giver nor receiver. */
function mayBeSecond(personId: string, row: Row): boolean {
	return row.givenBy !== personId && row.personId !== personId;
}

export type Candidate = {
	id: string;
	name: string;
	/** For each role they may not take: what stands against it, held now or earlier. */
	barred: Partial<Record<StudyRole, StudyRole>>;
};

/** Members of the lab to whom roles can be given, each with the roles that would break blinding. */
export async function loadCandidates(
	db: Queryable,
	grant: Grant<'team:read' | 'role:give'>
): Promise<Candidate[]> {
	const [members, held, variants] = [
		await listMemberNames(db, grant.labId),
		await loadEverHeld(db, grant.studyId),
		await loadVariants(db, grant.studyId)
	];
	return members.map(({ id, name }) => {
		const own = held.get(id) ?? [];
		const barred: Candidate['barred'] = {};
		for (const role of roleOrder) {
			const partner = findForbiddenPartner(own, role, variants);
			if (partner) barred[role] = partner as StudyRole;
		}
		return { id, name, barred };
	});
}

/** The roles that count for forbidden pairs, by person: held now, or earlier, or waiting. */
export async function loadEverHeld(
	db: Queryable,
	studyId: string
): Promise<Map<string, StudyRole[]>> {
	const rows = await db.select().from(studyRole).where(eq(studyRole.studyId, studyId));
	const held = new Map<string, StudyRole[]>();
	for (const row of rows) {
		// Taken back before it was confirmed: it never let anybody see an arm.
		const neverCounted = row.endedAt !== null && seesArms(row.role) && row.confirmedAt === null;
		if (!neverCounted) held.set(row.personId, [...(held.get(row.personId) ?? []), row.role]);
	}
	return held;
}

/** Who may confirm roles here: everybody with a part in the study, waiting or not, and stewards. */
async function listSecondPeople(db: Queryable, grant: TeamGrant) {
	const roles = await db
		.select({ personId: studyRole.personId })
		.from(studyRole)
		.where(and(eq(studyRole.studyId, grant.studyId), isNull(studyRole.endedAt)));
	const stewards = await db
		.select({ personId: membership.personId })
		.from(membership)
		.where(
			and(
				eq(membership.labId, grant.labId),
				eq(membership.isSteward, true),
				isNull(membership.endedAt)
			)
		);
	const able = new Set([...roles, ...stewards].map((row) => row.personId));
	return (await listMemberNames(db, grant.labId)).filter(({ id }) => able.has(id));
}

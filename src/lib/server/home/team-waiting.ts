import { and, asc, eq, isNull, ne } from 'drizzle-orm';
import { alias } from 'drizzle-orm/pg-core';
import type { Grant } from '$lib/server/access/require-permission';
import { seesArms } from '$lib/server/access/visibility';
import type { Queryable } from '$lib/server/db/client';
import { person, studyRole } from '$lib/server/db/schema';
import { roleInSentence, roleWithArticle } from '$lib/members/role-names';
import type { WaitingItem } from '$lib/waiting/waiting-item';

/**
 * Roles that see arms and wait for their second person, for everybody but who gave them: to confirm,
 * or one's own to wait for.
 */
export async function loadTeamWaiting(
	db: Queryable,
	grant: Grant<'team:read'>
): Promise<WaitingItem[]> {
	const giver = alias(person, 'giver');
	const rows = await db
		.select({ role: studyRole, name: person.name, email: person.email, giverName: giver.name })
		.from(studyRole)
		.innerJoin(person, eq(person.id, studyRole.personId))
		.innerJoin(giver, eq(giver.id, studyRole.givenBy))
		.where(
			and(
				eq(studyRole.studyId, grant.studyId),
				isNull(studyRole.endedAt),
				isNull(studyRole.confirmedBy),
				ne(studyRole.givenBy, grant.personId)
			)
		)
		.orderBy(asc(studyRole.givenAt));
	return rows
		.filter(({ role }) => seesArms(role.role))
		.map(({ role, name, email, giverName }): WaitingItem => {
			const isOwn = role.personId === grant.personId;
			const label = roleInSentence(role.role);
			return {
				key: `role ${role.id}`,
				kind: 'role',
				participantId: null,
				tone: isOwn ? 'plain' : 'amber',
				title: isOwn ? `You are to be ${label}` : `${name ?? email} is to be ${label}`,
				what: isOwn
					? `${giverName ?? 'The steward'} gave you the role. A second person must confirm it.`
					: `${giverName ?? 'The steward'} asks for a second person: ${roleWithArticle(role.role)} sees arms.`,
				ifNothing: 'The role does not count, and its steps wait.',
				byMs: null,
				byText: null,
				act: {
					label: isOwn ? 'See who can confirm it' : 'Confirm or not',
					href: `/studies/${grant.studyId}/team`
				}
			};
		});
}

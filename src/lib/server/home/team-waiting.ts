import { and, asc, eq, isNull, ne } from 'drizzle-orm';
import { alias } from 'drizzle-orm/pg-core';
import { seesArms } from '$lib/server/access/visibility';
import { person, studyRole } from '$lib/server/db/schema';
import { roleInSentence, roleWithArticle } from '$lib/members/role-names';
import type { WaitingItem, WaitingSource } from './waiting';

/** Roles that see arms and wait for their second person: what this person can do about each. */
export const loadTeamWaiting: WaitingSource = async (db, _clock, place) => {
	const giver = alias(person, 'giver');
	const rows = await db
		.select({ role: studyRole, name: person.name, email: person.email, giverName: giver.name })
		.from(studyRole)
		.innerJoin(person, eq(person.id, studyRole.personId))
		.innerJoin(giver, eq(giver.id, studyRole.givenBy))
		.where(
			and(
				eq(studyRole.studyId, place.studyId),
				isNull(studyRole.endedAt),
				isNull(studyRole.confirmedBy),
				ne(studyRole.givenBy, place.personId)
			)
		)
		.orderBy(asc(studyRole.givenAt));
	const href = `/studies/${place.studyId}/team`;
	return rows
		.filter(({ role }) => seesArms(role.role))
		.map(({ role, name, email, giverName }): WaitingItem => {
			const isOwn = role.personId === place.personId;
			return {
				title: isOwn
					? `You are to be ${roleInSentence(role.role)}`
					: `${name ?? email} is to be ${roleInSentence(role.role)}`,
				detail: isOwn
					? `${giverName ?? 'The steward'} gave you the role. It counts once a second person has confirmed it.`
					: `${giverName ?? 'The steward'} asks for a second person: ${roleWithArticle(role.role)} sees arms.`,
				dueAtMs: null,
				act: { label: isOwn ? 'See who can confirm it' : 'Confirm or not', href }
			};
		});
};

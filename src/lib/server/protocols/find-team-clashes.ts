import { eq } from 'drizzle-orm';
import { findForbiddenPartner, seesArms } from '$lib/server/access/visibility';
import type { Grant } from '$lib/server/access/require-permission';
import type { Queryable } from '$lib/server/db/client';
import { person, studyRole, type StudyRole } from '$lib/server/db/schema';

/** Two roles of one person, held now or earlier, that a version's exceptions do not let meet. */
export type TeamClash = { name: string; role: StudyRole; other: StudyRole };

/** Whether the database refused a version because of who is in the team. */
export function isTeamRefusal(error: unknown): boolean {
	const cause = error instanceof Error ? (error.cause as { constraint_name?: string }) : undefined;
	return cause?.constraint_name === 'protocol_version_team';
}

/** Who of the team holds or held two roles that must not meet under these exceptions. */
export async function findTeamClashes(
	db: Queryable,
	grant: Grant<'protocol:freeze'>,
	variants: readonly string[]
): Promise<TeamClash[]> {
	const rows = await db
		.select({ held: studyRole, name: person.name, email: person.email })
		.from(studyRole)
		.innerJoin(person, eq(person.id, studyRole.personId))
		.where(eq(studyRole.studyId, grant.studyId))
		.orderBy(studyRole.givenAt, studyRole.id);
	// A role that was taken back before its second person confirmed it never counted.
	const counted = rows.filter(
		({ held }) => held.endedAt === null || held.confirmedAt !== null || !seesArms(held.role)
	);
	const clashes: TeamClash[] = [];
	for (const [index, { held, name, email }] of counted.entries()) {
		const earlier = counted.slice(0, index).filter((one) => one.held.personId === held.personId);
		const roles = earlier.map((one) => one.held.role);
		const other = findForbiddenPartner(roles, held.role, variants) as StudyRole | null;
		if (other) clashes.push({ name: name ?? email, role: held.role, other });
	}
	return clashes;
}

import { and, asc, desc, eq, isNull } from 'drizzle-orm';
import { loadHeldRoles, type Grant } from '$lib/server/access/require-permission';
import { findSections } from '$lib/server/access/sections';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import { lab, membership, study, type StudyRole } from '$lib/server/db/schema';
import { findLabGaps } from '$lib/server/labs/load-lab';
import { isPaused } from '$lib/server/pauses/is-paused';
import { loadRunningVersion } from '$lib/server/studies/load-gates';
import { loadWaiting } from '$lib/server/waiting/load-waiting';
import { sortByUrgency, type WaitingItem } from '$lib/waiting/waiting-item';
import { loadTeamWaiting } from './team-waiting';

export type HomeStudy = {
	id: string;
	workingTitle: string;
	state: StudyState;
	versionNumber: number | null;
	roles: StudyRole[];
	waitingRoles: StudyRole[];
	/** Where its title leads: the first section this person may open. */
	href: string;
	waiting: WaitingItem[];
};
export type StudyState = 'in design' | 'running' | 'paused' | 'closed';
export type HomeLab = {
	id: string;
	name: string;
	zone: string;
	isSteward: boolean;
	/** For the steward: how much is missing before visits can be booked. */
	gapCount: number;
	studies: HomeStudy[];
};

/** Asks for the person's grant in one of the studies listed here. */
export type GrantFor = <P extends 'team:read' | 'today:read' | 'lab:read'>(
	permission: P,
	place: { studyId?: string; labId?: string }
) => Promise<Grant<P>>;

/**
 * The labs of a person, in each the studies they have a part in (a steward: all of them), and in
 * each study what waits for them.
 */
export async function loadHome(
	db: Queryable,
	clock: Clock,
	grant: Grant<'home:read'>,
	grantFor: GrantFor
): Promise<HomeLab[]> {
	const labs = await db
		.select({ id: lab.id, name: lab.name, zone: lab.zone, isSteward: membership.isSteward })
		.from(membership)
		.innerJoin(lab, eq(lab.id, membership.labId))
		.where(and(eq(membership.personId, grant.personId), isNull(membership.endedAt)))
		.orderBy(asc(lab.name));
	return Promise.all(
		labs.map(async (own) => ({
			...own,
			gapCount: own.isSteward
				? (await findLabGaps(db, await grantFor('lab:read', { labId: own.id }))).length
				: 0,
			studies: await loadStudies(db, clock, grantFor, { ...own, personId: grant.personId })
		}))
	);
}

type Member = { id: string; isSteward: boolean; personId: string };

async function loadStudies(
	db: Queryable,
	clock: Clock,
	grantFor: GrantFor,
	own: Member
): Promise<HomeStudy[]> {
	const rows = await db
		.select()
		.from(study)
		.where(eq(study.labId, own.id))
		.orderBy(desc(study.createdAt));
	const found: HomeStudy[] = [];
	for (const row of rows) {
		const held = await loadHeldRoles(db, { personId: own.personId, studyId: row.id });
		const sections = findSections(row.id, { isMember: true, isSteward: own.isSteward, ...held });
		const [first] = sections;
		if (!first) continue;
		found.push({
			id: row.id,
			workingTitle: row.workingTitle,
			...(await loadState(db, clock, row)),
			...held,
			href: first.href,
			waiting: await loadStudyWaiting(db, clock, grantFor, { studyId: row.id, ...held })
		});
	}
	return found;
}

/** What waits in one study: the steps of one's roles, and roles to be confirmed. */
async function loadStudyWaiting(
	db: Queryable,
	clock: Clock,
	grantFor: GrantFor,
	place: { studyId: string; roles: readonly StudyRole[] }
): Promise<WaitingItem[]> {
	const items = await loadTeamWaiting(db, await grantFor('team:read', place));
	if (place.roles.length > 0) {
		const grant = await grantFor('today:read', place);
		items.push(...(await loadWaiting(db, clock, grant)));
	}
	// Steps of other people are on the study's own first page.
	return sortByUrgency(items.filter((item) => item.act !== null));
}

/** How a study stands: the version that runs, whether it is paused or closed. */
async function loadState(
	db: Queryable,
	clock: Clock,
	row: typeof study.$inferSelect
): Promise<{ state: StudyState; versionNumber: number | null }> {
	const running = await loadRunningVersion(db, clock, row.id);
	const versionNumber = running?.number ?? null;
	if (row.closedAt) return { state: 'closed', versionNumber };
	if (await isPaused(db, row.id)) return { state: 'paused', versionNumber };
	return { state: running ? 'running' : 'in design', versionNumber };
}

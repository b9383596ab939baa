import { and, asc, desc, eq, isNotNull, isNull, inArray } from 'drizzle-orm';
import { loadHeldRoles, type Grant } from '$lib/server/access/require-permission';
import { findSections } from '$lib/server/access/sections';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import {
	lab,
	membership,
	protocolVersion,
	study,
	studyPause,
	type StudyRole
} from '$lib/server/db/schema';
import { findLabGaps } from '$lib/server/labs/load-lab';
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
	const states = await loadStates(db, rows);
	const found: HomeStudy[] = [];
	for (const row of rows) {
		const held = await loadHeldRoles(db, { personId: own.personId, studyId: row.id });
		const sections = findSections(row.id, { isMember: true, isSteward: own.isSteward, ...held });
		const [first] = sections;
		if (!first) continue;
		found.push({
			id: row.id,
			workingTitle: row.workingTitle,
			...(states.get(row.id) ?? { state: 'in design', versionNumber: null }),
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

/** How each study stands: the newest frozen version, whether it is paused or closed. */
async function loadStates(db: Queryable, studies: (typeof study.$inferSelect)[]) {
	const ids = studies.map((row) => row.id);
	const states = new Map<string, { state: StudyState; versionNumber: number | null }>();
	if (ids.length === 0) return states;
	const versions = await db
		.select({ studyId: protocolVersion.studyId, number: protocolVersion.number })
		.from(protocolVersion)
		.where(and(inArray(protocolVersion.studyId, ids), isNotNull(protocolVersion.hash)))
		.orderBy(asc(protocolVersion.number));
	const pauses = await db
		.select({ studyId: studyPause.studyId })
		.from(studyPause)
		.where(
			and(
				inArray(studyPause.studyId, ids),
				isNull(studyPause.participantId),
				isNull(studyPause.liftedAt)
			)
		);
	const newest = new Map(versions.map((row) => [row.studyId, row.number]));
	const paused = new Set(pauses.map((row) => row.studyId));
	for (const { id, closedAt } of studies) {
		const versionNumber = newest.get(id) ?? null;
		const open = versionNumber === null ? 'in design' : 'running';
		const state = closedAt ? 'closed' : paused.has(id) ? 'paused' : open;
		states.set(id, { state, versionNumber });
	}
	return states;
}

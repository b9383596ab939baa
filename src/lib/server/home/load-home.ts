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
import type { WaitingItem } from './waiting';
import { waitingSources } from './waiting-sources';

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
	studies: HomeStudy[];
};

/**
 * The labs of a person, in each the studies they have a part in (a steward: all of them), and in
 * each study what waits for them.
 */
export async function loadHome(
	db: Queryable,
	clock: Clock,
	grant: Grant<'home:read'>
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
			studies: await loadStudies(db, clock, { ...own, personId: grant.personId })
		}))
	);
}

type Member = { id: string; isSteward: boolean; personId: string };

async function loadStudies(db: Queryable, clock: Clock, own: Member): Promise<HomeStudy[]> {
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
			waiting: await loadWaiting(db, clock, { ...own, ...held, labId: own.id, studyId: row.id })
		});
	}
	return found;
}

async function loadWaiting(
	db: Queryable,
	clock: Clock,
	place: Parameters<(typeof waitingSources)[number]>[2]
): Promise<WaitingItem[]> {
	const { personId, labId, studyId, isSteward, roles, waitingRoles } = place;
	const asked = { personId, labId, studyId, isSteward, roles, waitingRoles };
	const found: WaitingItem[] = [];
	for (const source of waitingSources) found.push(...(await source(db, clock, asked)));
	const due = (item: WaitingItem) => item.dueAtMs ?? Number.POSITIVE_INFINITY;
	return found.toSorted((a, b) => (due(a) === due(b) ? 0 : due(a) - due(b)));
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

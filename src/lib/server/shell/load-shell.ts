import { and, eq, isNull } from 'drizzle-orm';
import { roleInSentence } from '$lib/members/role-names';
import { loadHeldRoles } from '$lib/server/access/require-permission';
import { findLabPages, findSections, type Section } from '$lib/server/access/sections';
import type { Clock } from '$lib/server/clock';
import { config } from '$lib/server/config';
import type { Database } from '$lib/server/db/client';
import { lab, membership, study, studyPause, type StudyRole } from '$lib/server/db/schema';
import { loadRunningVersion } from '$lib/server/studies/load-gates';
import { formatWithZone } from '$lib/time/format-instant';

export type Shell = {
	person: { name: string; email: string } | null;
	lab: { id: string; name: string; zone: string } | null;
	study: { id: string; workingTitle: string; state: string; versionNumber: number | null } | null;
	sections: Section[];
	/** The lab's pages that are offered beside a study's sections. */
	labPages: Section[];
	nowMs: number;
	nowText: string;
	zoneText: string;
	demo: {
		kind: 'demo' | 'rehearsal';
		mailboxUrl: string | null;
		nowText: string;
		/** What the person is here, in words; empty for nobody. */
		roleText: string;
	} | null;
};

/** The masthead's content for whoever is signed in; a study only when they have a part in it. */
export async function loadShell(
	locals: App.Locals,
	params: { studyId?: string; labId?: string }
): Promise<Shell> {
	const found = locals.person ? await findPlace(locals, locals.person.id, params) : null;
	const zone = found?.lab.zone ?? 'UTC';
	const [nowText = '', zoneText = ''] = splitZone(formatWithZone(locals.clock.now(), zone));
	return {
		person: locals.person ? { name: locals.person.name, email: locals.person.email } : null,
		lab: found?.lab ?? null,
		study: found?.study ?? null,
		sections: found?.sections ?? [],
		labPages: found?.labPages ?? [],
		nowMs: locals.clock.now(),
		nowText,
		zoneText,
		demo:
			locals.instanceKind === 'own'
				? null
				: {
						kind: locals.instanceKind,
						mailboxUrl: config().OVALRY_MAILBOX_URL ?? null,
						nowText,
						roleText: found?.roleText ?? ''
					}
	};
}

function splitZone(text: string): string[] {
	const cut = text.search(/ [^ ]+ \(UTC/);
	return cut < 0 ? [text, ''] : [text.slice(0, cut), text.slice(cut + 1)];
}

type Place = Pick<Shell, 'study' | 'sections' | 'labPages'> & {
	lab: NonNullable<Shell['lab']>;
	/** What the person is here, in words. */
	roleText: string;
};

async function findPlace(
	{ db, clock }: Pick<App.Locals, 'db' | 'clock'>,
	personId: string,
	params: { studyId?: string; labId?: string }
): Promise<Place | null> {
	const memberships = await db
		.select({ id: lab.id, name: lab.name, zone: lab.zone, isSteward: membership.isSteward })
		.from(membership)
		.innerJoin(lab, eq(lab.id, membership.labId))
		.where(and(eq(membership.personId, personId), isNull(membership.endedAt)));
	const own = params.studyId ? await findStudy(db, clock, params.studyId) : null;
	const labId = own?.labId ?? params.labId;
	const home = memberships.find((row) => row.id === labId) ?? memberships[0];
	if (!home) return null;
	const member = { isMember: true, isSteward: home.isSteward };
	const labPages = findLabPages(home.id, { ...member, roles: [] });
	const place: Place = {
		lab: { id: home.id, name: home.name, zone: home.zone },
		study: null,
		sections: labPages,
		labPages,
		roleText: home.isSteward ? 'steward' : 'member of the lab'
	};
	if (!own || own.labId !== home.id) return place;
	const held = await loadHeldRoles(db, { personId, studyId: own.id });
	const sections = findSections(own.id, { ...member, ...held });
	if (sections.length === 0) return place;
	// A steward without a role here sees that the study exists, not what its protocol says.
	return { ...place, study: own.study, sections, roleText: describe(home.isSteward, held.roles) };
}

function describe(isSteward: boolean, roles: readonly StudyRole[]): string {
	const names = [...(isSteward ? ['steward'] : []), ...roles.map(roleInSentence)];
	return names.join(', ') || 'no part in this study yet';
}

async function findStudy(db: Database, clock: Clock, studyId: string) {
	if (!/^[0-9a-f-]{36}$/i.test(studyId)) return null;
	const [row] = await db.select().from(study).where(eq(study.id, studyId));
	if (!row) return null;
	const running = await loadRunningVersion(db, clock, studyId);
	const [pause] = await db
		.select({ id: studyPause.id })
		.from(studyPause)
		.where(
			and(
				eq(studyPause.studyId, studyId),
				isNull(studyPause.participantId),
				isNull(studyPause.liftedAt)
			)
		);
	const state = row.closedAt ? 'closed' : pause ? 'paused' : running ? 'running' : 'in design';
	return {
		id: row.id,
		labId: row.labId,
		study: {
			id: row.id,
			workingTitle: row.workingTitle,
			state,
			versionNumber: running?.number ?? null
		}
	};
}

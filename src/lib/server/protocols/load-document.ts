import { and, desc, eq, isNull } from 'drizzle-orm';
import { roleNames } from '$lib/members/role-names';
import type { DocumentFacts } from '$lib/protocol/reporting/document-facts';
import { isAllowed, type Permission } from '$lib/server/access/permissions';
import { seesArms } from '$lib/server/access/visibility';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import { allocationSeal, lab, person, signOff, study, studyRole } from '$lib/server/db/schema';
import { listApprovals } from '$lib/server/ethics/list-approvals';
import { localDateOf } from '$lib/time/wall-clock';
import { findFrozenVersions } from './find-versions';
import { mayReadRule } from './may-read-rule';

/** Pages that checklists point to, with who opens them. */
const pages: Record<string, Permission> = {
	'/team': 'team:read',
	'/power': 'power:read',
	'/messages': 'message:read'
};

/**
 * A frozen version with everything that print, checklists, registry text and the board's pack say of it;
 * null where the study has no such version. Nothing in it is about a participant.
 */
export async function loadDocument(
	db: Queryable,
	clock: Clock,
	grant: Grant<'protocol:read'>,
	{ number }: { number?: number | undefined }
): Promise<DocumentFacts | null> {
	const { studyId } = grant;
	const versions = await findFrozenVersions(db, studyId);
	const version = versions.find((one) => number === undefined || one.number === number);
	const [home] = await db
		.select({ study, lab })
		.from(study)
		.innerJoin(lab, eq(lab.id, study.labId))
		.where(eq(study.id, studyId));
	if (!version || !home) return null;
	const { content, hash, frozenBy, reason } = version;
	const { zone } = home.lab;
	const approvals = await listApprovals(db, clock, grant);
	return {
		content,
		withRule: mayReadRule(grant),
		number: version.number,
		hash,
		frozenOn: localDateOf(version.frozenAtMs, zone),
		frozenBy,
		reason,
		workingTitle: home.study.workingTitle,
		publicTitle: home.study.publicTitle,
		labName: home.lab.name,
		phone: home.study.phone,
		approvals: approvals
			.filter(({ versionNumber }) => versionNumber === version.number)
			.map(({ board, reference, approvedOn, expiresOn, state }) => ({
				...{ board, reference, from: approvedOn, to: expiresOn, state }
			})),
		signedOff: await findSignOff(db, { studyId, hash, zone }),
		team: await loadTeamNames(db, studyId),
		isSealed: await hasSeal(db, studyId, hash),
		versionCount: versions.length,
		base: `/studies/${studyId}`,
		shut: Object.entries(pages)
			.filter(([, permission]) => !opens(grant, permission))
			.map(([path]) => path)
	};
}

function opens({ roles, isSteward }: Grant, permission: Permission): boolean {
	return isAllowed(permission, { isMember: true, isSteward, roles });
}

type Version = { studyId: string; hash: string; zone: string };

/** The statistician's latest word on a hash, where it signs it. */
async function findSignOff(db: Queryable, { studyId, hash, zone }: Version) {
	const [row] = await db
		.select({ signOff, name: person.name, email: person.email })
		.from(signOff)
		.innerJoin(person, eq(person.id, signOff.personId))
		.where(and(eq(signOff.studyId, studyId), eq(signOff.protocolHash, hash)))
		.orderBy(desc(signOff.at))
		.limit(1);
	if (row?.signOff.verdict !== 'signed') return null;
	return { by: row.name ?? row.email, on: localDateOf(row.signOff.at.getTime(), zone) };
}

/** Members whose role counts now, by what they are. */
async function loadTeamNames(db: Queryable, studyId: string): Promise<DocumentFacts['team']> {
	const rows = await db
		.select({ held: studyRole, name: person.name, email: person.email })
		.from(studyRole)
		.innerJoin(person, eq(person.id, studyRole.personId))
		.where(and(eq(studyRole.studyId, studyId), isNull(studyRole.endedAt)))
		.orderBy(studyRole.givenAt, studyRole.id);
	return rows
		.filter(({ held }) => !seesArms(held.role) || held.confirmedAt !== null)
		.map(({ held, name, email }) => ({ role: roleNames[held.role].label, name: name ?? email }));
}

async function hasSeal(db: Queryable, studyId: string, hash: string): Promise<boolean> {
	const rows = await db
		.select({ id: allocationSeal.id })
		.from(allocationSeal)
		.where(and(eq(allocationSeal.studyId, studyId), eq(allocationSeal.protocolHash, hash)))
		.limit(1);
	return rows.length > 0;
}

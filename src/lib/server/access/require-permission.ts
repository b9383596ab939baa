import { error, redirect } from '@sveltejs/kit';
import { and, desc, eq, isNotNull, isNull } from 'drizzle-orm';
import {
	lab,
	membership,
	protocolVersion,
	study,
	studyRole,
	type StudyRole
} from '$lib/server/db/schema';
import type { Queryable } from '$lib/server/db/client';
import { isAllowed, permissions, type Permission, type Standing } from './permissions';
import { findLevels, seesArms, type Item, type Level } from './visibility';

declare const granted: unique symbol;

/**
 * Proof that a person may do one thing, and the scope of every query made for it. Only
 * `requirePermission` makes one, so the compiler refuses an unguarded call of a feature function.
 */
export type Grant<P extends Permission = Permission> = {
	readonly [granted]: P;
	readonly permission: P;
	readonly personId: string;
	readonly personName: string;
	readonly labId: string;
	/** Empty for permissions that are not about a study. */
	readonly studyId: string;
	readonly roles: readonly StudyRole[];
	readonly isSteward: boolean;
	/** What this person may see of an item, after the variants of the study's protocol. */
	sees(item: Item): ReadonlySet<Level>;
};

type Scope = { labId?: string | undefined; studyId?: string | undefined };
const uuidPattern = /^[0-9a-f]{8}-[0-9a-f]{4}-[1-8][0-9a-f]{3}-[89ab][0-9a-f]{3}-[0-9a-f]{12}$/i;

/**
 * The first line of every server entry. Nobody signed in: to the sign-in page and back. Not allowed,
 * or no such study or lab: 404, one like the other.
 */
export async function requirePermission<P extends Permission>(
	locals: App.Locals,
	permission: P,
	params: Scope = {}
): Promise<Grant<P>> {
	const { person, db } = locals;
	if (!person) redirect(303, `/signin?to=${encodeURIComponent(locals.path)}`);
	const found = await findStanding(db, { personId: person.id, scope: params, permission });
	if (!found || !isAllowed(permission, found)) error(404, 'Not found');
	const { labId, studyId, roles, isSteward, variants } = found;
	const viewer = isSteward ? (['steward', ...roles] as const) : roles;
	return {
		permission,
		personId: person.id,
		personName: person.name,
		labId,
		studyId,
		roles,
		isSteward,
		sees: (item: Item) => findLevels(viewer, item, variants)
	} as unknown as Grant<P>;
}

type Found = Standing & { labId: string; studyId: string; variants: string[] };
type Question = { personId: string; scope: Scope; permission: Permission };

async function findStanding(db: Queryable, question: Question): Promise<Found | null> {
	const { scope } = permissions[question.permission];
	if (scope === 'person') return { ...nobody, isMember: true };
	if (scope === 'lab') return findLabStanding(db, question.personId, question.scope.labId);
	return findStudyStanding(db, question.personId, question.scope.studyId);
}

const nobody = {
	isMember: false,
	isSteward: false,
	roles: [] as StudyRole[],
	labId: '',
	studyId: '',
	variants: [] as string[]
};

async function findLabStanding(
	db: Queryable,
	personId: string,
	labId?: string
): Promise<Found | null> {
	if (!labId || !uuidPattern.test(labId)) return null;
	const [row] = await db
		.select({ isSteward: membership.isSteward })
		.from(membership)
		.innerJoin(lab, eq(lab.id, membership.labId))
		.where(
			and(
				eq(membership.labId, labId),
				eq(membership.personId, personId),
				isNull(membership.endedAt)
			)
		);
	return row ? { ...nobody, isMember: true, isSteward: row.isSteward, labId } : null;
}

async function findStudyStanding(
	db: Queryable,
	personId: string,
	studyId?: string
): Promise<Found | null> {
	if (!studyId || !uuidPattern.test(studyId)) return null;
	const [owner] = await db.select({ labId: study.labId }).from(study).where(eq(study.id, studyId));
	if (!owner) return null;
	const standing = await findLabStanding(db, personId, owner.labId);
	if (!standing) return null;
	const held = await loadHeldRoles(db, { personId, studyId });
	return { ...standing, studyId, ...held, variants: await loadVariants(db, studyId) };
}

type Place = { personId: string; studyId: string };

/** The person's roles in the study that count now: not ended and, where they see arms, confirmed. */
export async function loadRoles(db: Queryable, place: Place): Promise<StudyRole[]> {
	return (await loadHeldRoles(db, place)).roles;
}

/** The person's roles in the study: those that count now, and those that wait for a second person. */
export async function loadHeldRoles(
	db: Queryable,
	{ personId, studyId }: Place
): Promise<{ roles: StudyRole[]; waitingRoles: StudyRole[] }> {
	const rows = await db
		.select({ role: studyRole.role, confirmedBy: studyRole.confirmedBy })
		.from(studyRole)
		.where(
			and(
				eq(studyRole.studyId, studyId),
				eq(studyRole.personId, personId),
				isNull(studyRole.endedAt)
			)
		);
	const waits = (row: (typeof rows)[number]) => seesArms(row.role) && !row.confirmedBy;
	return {
		roles: rows.filter((row) => !waits(row)).map((row) => row.role),
		waitingRoles: rows.filter(waits).map((row) => row.role)
	};
}

/** The variants that the latest frozen protocol of a study declares. */
export async function loadVariants(db: Queryable, studyId: string): Promise<string[]> {
	const [row] = await db
		.select({ content: protocolVersion.content })
		.from(protocolVersion)
		.where(and(eq(protocolVersion.studyId, studyId), isNotNull(protocolVersion.hash)))
		.orderBy(desc(protocolVersion.number))
		.limit(1);
	return row?.content.variants ?? [];
}

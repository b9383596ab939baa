import { and, eq, isNull } from 'drizzle-orm';
import { DrizzleQueryError } from 'drizzle-orm/errors';
import { loadVariants, type Grant } from '$lib/server/access/require-permission';
import { findForbiddenPartner, seesArms } from '$lib/server/access/visibility';
import type { Clock } from '$lib/server/clock';
import type { Database, Queryable } from '$lib/server/db/client';
import { membership, studyRole, type StudyRole } from '$lib/server/db/schema';
import { loadEverHeld } from './load-team';
import { recordRoleEvent } from './record-role-event';

export type GiveRoleAnswer =
	| { ok: true; waits: boolean }
	| { ok: false; reason: 'no-such-member' | 'has-it' | 'own-role' }
	| { ok: false; reason: 'forbidden-pair'; partner: StudyRole };

/**
 * Gives a member a role in the study. A role that sees arms counts only once a second person, who is
 * neither giver nor receiver, has confirmed it; nobody gives such a role to themself.
 */
export async function giveRole(
	db: Database,
	clock: Clock,
	grant: Grant<'role:give'>,
	{ personId, role }: { personId: string; role: StudyRole }
): Promise<GiveRoleAnswer> {
	if (personId === grant.personId && (seesArms(role) || role === 'monitor')) {
		return { ok: false, reason: 'own-role' };
	}
	try {
		return await db.transaction(async (tx) => {
			const fault = await findFault(tx, grant, { personId, role });
			if (fault) return fault;
			await writeRole(tx, clock, grant, { personId, role });
			const body = { personId, role };
			const { studyId } = grant;
			await recordRoleEvent(tx, clock, grant, { kind: 'role-given', studyId, body });
			return { ok: true, waits: seesArms(role) };
		});
	} catch (error) {
		// Two roles given at the same moment: the database refused the second.
		const constraint = constraintOf(error);
		if (constraint === 'study_role_once') return { ok: false, reason: 'has-it' };
		if (constraint !== forbiddenPair) throw error;
		return { ok: false, reason: 'forbidden-pair', partner: role };
	}
}

type Refusal = Exclude<GiveRoleAnswer, { ok: true }>;
type Wanted = { personId: string; role: StudyRole };

async function findFault(
	tx: Queryable,
	grant: Grant<'role:give'>,
	{ personId, role }: Wanted
): Promise<Refusal | null> {
	const [member] = await tx
		.select({ id: membership.id })
		.from(membership)
		.where(
			and(
				eq(membership.labId, grant.labId),
				eq(membership.personId, personId),
				isNull(membership.endedAt)
			)
		);
	if (!member) return { ok: false, reason: 'no-such-member' };
	const [same] = await tx.select().from(studyRole).where(isHeld(grant, { personId, role }));
	if (same) return { ok: false, reason: 'has-it' };
	const held = (await loadEverHeld(tx, grant.studyId)).get(personId) ?? [];
	const partner = findForbiddenPartner(held, role, await loadVariants(tx, grant.studyId));
	return partner ? { ok: false, reason: 'forbidden-pair', partner: partner as StudyRole } : null;
}

async function writeRole(
	tx: Queryable,
	clock: Clock,
	grant: Grant<'role:give'>,
	{ personId, role }: Wanted
): Promise<void> {
	await tx.insert(studyRole).values({
		studyId: grant.studyId,
		personId,
		role,
		givenBy: grant.personId,
		givenAt: new Date(clock.now())
	});
}

export type ConfirmAnswer =
	| { ok: true; personId: string; role: StudyRole }
	| { ok: false; reason: 'not-waiting' | 'own-role' | 'forbidden-pair' };

/** Confirms, as the second person, a role that sees arms. */
export async function confirmRole(
	db: Database,
	clock: Clock,
	grant: Grant<'role:confirm'>,
	roleId: string
): Promise<ConfirmAnswer> {
	try {
		return await db.transaction(async (tx) => {
			const [found] = await tx.select().from(studyRole).where(isOwn(grant, roleId)).for('update');
			if (!found || found.endedAt || found.confirmedBy || !seesArms(found.role)) {
				return { ok: false, reason: 'not-waiting' };
			}
			const { personId, role, studyId } = found;
			if (found.givenBy === grant.personId || personId === grant.personId) {
				return { ok: false, reason: 'own-role' };
			}
			const confirmed = { confirmedBy: grant.personId, confirmedAt: new Date(clock.now()) };
			await tx.update(studyRole).set(confirmed).where(eq(studyRole.id, roleId));
			const body = { personId, role };
			await recordRoleEvent(tx, clock, grant, { kind: 'role-confirmed', studyId, body });
			return { ok: true, personId, role };
		});
	} catch (error) {
		if (constraintOf(error) !== forbiddenPair) throw error;
		return { ok: false, reason: 'forbidden-pair' };
	}
}

export type EndRoleAnswer =
	{ ok: true; personId: string; role: StudyRole } | { ok: false; reason: 'no-such-role' };

/** Ends a role at once. It goes on to bar the roles that it may not join. */
export async function endRole(
	db: Database,
	clock: Clock,
	grant: Grant<'role:give'>,
	roleId: string
): Promise<EndRoleAnswer> {
	return db.transaction(async (tx) => {
		const [ended] = await tx
			.update(studyRole)
			.set({ endedAt: new Date(clock.now()) })
			.where(and(isOwn(grant, roleId), isNull(studyRole.endedAt)))
			.returning();
		if (!ended) return { ok: false, reason: 'no-such-role' };
		const { personId, role, studyId } = ended;
		const body = { personId, role };
		await recordRoleEvent(tx, clock, grant, { kind: 'role-ended', studyId, body });
		return { ok: true, personId, role };
	});
}

function isHeld(grant: Grant, { personId, role }: Wanted) {
	return and(
		eq(studyRole.studyId, grant.studyId),
		eq(studyRole.personId, personId),
		eq(studyRole.role, role),
		isNull(studyRole.endedAt)
	);
}

function isOwn(grant: Grant, roleId: string) {
	return and(eq(studyRole.id, roleId), eq(studyRole.studyId, grant.studyId));
}

const forbiddenPair = 'study_role_forbidden_pair';

function constraintOf(error: unknown): string {
	if (!(error instanceof DrizzleQueryError)) return '';
	return (error.cause as { constraint_name?: string } | undefined)?.constraint_name ?? '';
}

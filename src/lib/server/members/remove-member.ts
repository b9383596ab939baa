import { and, eq, inArray, isNull } from 'drizzle-orm';
import type { Grant } from '$lib/server/access/require-permission';
import { endSessionsOf } from '$lib/server/auth/sessions';
import type { Clock } from '$lib/server/clock';
import type { Database, Queryable } from '$lib/server/db/client';
import { lab, membership, staff, study, studyRole } from '$lib/server/db/schema';
import { recordLabEvent } from '$lib/server/labs/record-lab-event';
import { recordRoleEvent } from './record-role-event';

type Manager = Grant<'lab:manage'>;
export type RemoveAnswer = { ok: true } | { ok: false; reason: 'no-such-member' | 'last-steward' };

/**
 * Ends a membership and every role that came with it, and signs the person out everywhere at once.
 * The rows stay: what somebody saw earlier keeps forbidding roles later.
 */
export async function removeMember(
	db: Database,
	clock: Clock,
	grant: Manager,
	personId: string
): Promise<RemoveAnswer> {
	return db.transaction(async (tx) => {
		const fault = await findFault(tx, grant, personId);
		if (fault) return { ok: false, reason: fault };
		const endedAt = new Date(clock.now());
		const ofMember = and(eq(membership.labId, grant.labId), eq(membership.personId, personId));
		await tx.update(membership).set({ endedAt, isSteward: false }).where(ofMember);
		const roles = await endRoles(tx, grant, { personId, endedAt });
		await tx
			.update(staff)
			.set({ endedAt })
			.where(
				and(eq(staff.labId, grant.labId), eq(staff.personId, personId), isNull(staff.endedAt))
			);
		await endSessionsOf(tx, personId);
		for (const { studyId, role } of roles) {
			await recordRoleEvent(tx, clock, grant, {
				kind: 'role-ended',
				studyId,
				body: { personId, role }
			});
		}
		await recordLabEvent(tx, clock, grant, { kind: 'member-removed', body: { personId } });
		return { ok: true };
	});
}

export type StewardAnswer = { ok: true } | { ok: false; reason: 'no-such-member' | 'last-steward' };

/** Makes a member a steward as well, or a plain member again; somebody always stays steward. */
export async function setSteward(
	db: Database,
	clock: Clock,
	grant: Manager,
	{ personId, isSteward }: { personId: string; isSteward: boolean }
): Promise<StewardAnswer> {
	return db.transaction(async (tx) => {
		const stewards = await lockStewards(tx, grant);
		if (!isSteward && stewards.every((id) => id === personId)) {
			return { ok: false, reason: 'last-steward' };
		}
		const changed = await tx
			.update(membership)
			.set({ isSteward })
			.where(
				and(
					eq(membership.labId, grant.labId),
					eq(membership.personId, personId),
					isNull(membership.endedAt)
				)
			)
			.returning({ id: membership.id });
		if (changed.length === 0) return { ok: false, reason: 'no-such-member' };
		const kind = isSteward ? 'steward-given' : 'steward-ended';
		await recordLabEvent(tx, clock, grant, { kind, body: { personId } });
		return { ok: true };
	});
}

async function findFault(
	tx: Queryable,
	grant: Manager,
	personId: string
): Promise<'no-such-member' | 'last-steward' | null> {
	const stewards = await lockStewards(tx, grant);
	const [found] = await tx
		.select({ id: membership.id })
		.from(membership)
		.where(
			and(
				eq(membership.labId, grant.labId),
				eq(membership.personId, personId),
				isNull(membership.endedAt)
			)
		);
	if (!found) return 'no-such-member';
	return stewards.every((id) => id === personId) ? 'last-steward' : null;
}

/** The lab's stewards; two changes of them wait for each other. */
async function lockStewards(tx: Queryable, grant: Manager): Promise<string[]> {
	await tx.select({ id: lab.id }).from(lab).where(eq(lab.id, grant.labId)).for('update');
	const rows = await tx
		.select({ personId: membership.personId })
		.from(membership)
		.where(
			and(
				eq(membership.labId, grant.labId),
				eq(membership.isSteward, true),
				isNull(membership.endedAt)
			)
		);
	return rows.map((row) => row.personId);
}

async function endRoles(
	tx: Queryable,
	grant: Manager,
	{ personId, endedAt }: { personId: string; endedAt: Date }
) {
	const studies = tx.select({ id: study.id }).from(study).where(eq(study.labId, grant.labId));
	return tx
		.update(studyRole)
		.set({ endedAt })
		.where(
			and(
				eq(studyRole.personId, personId),
				inArray(studyRole.studyId, studies),
				isNull(studyRole.endedAt)
			)
		)
		.returning({ studyId: studyRole.studyId, role: studyRole.role });
}

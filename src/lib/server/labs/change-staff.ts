import { and, eq, isNull } from 'drizzle-orm';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Database, Queryable } from '$lib/server/db/client';
import { membership, staff } from '$lib/server/db/schema';
import type { OpenHours } from '$lib/labs/weekly-hours';
import { hasVisitsAhead } from './change-lab';
import { recordLabEvent } from './record-lab-event';
import { replaceHours } from './set-weekly-hours';

type Manager = Grant<'lab:manage'>;
/** `personId` ties the staff member to somebody who can sign in; null for nobody. */
type StaffFacts = { name: string; personId: string | null };
export type ChangeStaffAnswer =
	| { ok: true; id: string }
	| { ok: false; reason: 'no-such-staff' | 'no-such-member' | 'member-taken' };

export async function addStaff(
	db: Database,
	clock: Clock,
	grant: Manager,
	{ hours, ...facts }: StaffFacts & { hours: OpenHours[] }
): Promise<ChangeStaffAnswer> {
	return db.transaction(async (tx) => {
		const fault = await findFault(tx, grant, facts);
		if (fault) return { ok: false, reason: fault };
		const [row] = await tx
			.insert(staff)
			.values({ labId: grant.labId, ...facts })
			.returning({ id: staff.id });
		if (!row) throw new Error('inserted staff has an id');
		await replaceHours(tx, grant, { owner: { staffId: row.id }, hours });
		const body = { staffId: row.id, hours };
		await recordLabEvent(tx, clock, grant, { kind: 'staff-added', body });
		return { ok: true, id: row.id };
	});
}

export async function changeStaff(
	db: Database,
	clock: Clock,
	grant: Manager,
	{ id, hours, ...facts }: StaffFacts & { id: string; hours: OpenHours[] }
): Promise<ChangeStaffAnswer> {
	return db.transaction(async (tx) => {
		const fault = await findFault(tx, grant, { ...facts, id });
		if (fault) return { ok: false, reason: fault };
		const changed = await tx
			.update(staff)
			.set(facts)
			.where(isOwn(grant, id))
			.returning({ id: staff.id });
		if (changed.length === 0) return { ok: false, reason: 'no-such-staff' };
		await replaceHours(tx, grant, { owner: { staffId: id }, hours });
		const body = { staffId: id, hours };
		await recordLabEvent(tx, clock, grant, { kind: 'staff-changed', body });
		return { ok: true, id };
	});
}

export type EndStaffAnswer =
	{ ok: true } | { ok: false; reason: 'no-such-staff' | 'visits-booked' };

/** Takes a staff member out of planning. Visits they are booked to run must be moved first. */
export async function endStaff(
	db: Database,
	clock: Clock,
	grant: Manager,
	id: string
): Promise<EndStaffAnswer> {
	return db.transaction(async (tx) => {
		if (await hasVisitsAhead(tx, clock, grant, { staffId: id })) {
			return { ok: false, reason: 'visits-booked' };
		}
		return setEnded(tx, clock, grant, { id, endedAt: new Date(clock.now()) });
	});
}

export async function restoreStaff(
	db: Database,
	clock: Clock,
	grant: Manager,
	id: string
): Promise<EndStaffAnswer> {
	return db.transaction((tx) => setEnded(tx, clock, grant, { id, endedAt: null }));
}

async function setEnded(
	tx: Queryable,
	clock: Clock,
	grant: Manager,
	{ id, endedAt }: { id: string; endedAt: Date | null }
): Promise<EndStaffAnswer> {
	const changed = await tx.update(staff).set({ endedAt }).where(isOwn(grant, id)).returning();
	if (changed.length === 0) return { ok: false, reason: 'no-such-staff' };
	const kind = endedAt ? 'staff-ended' : 'staff-restored';
	await recordLabEvent(tx, clock, grant, { kind, body: { staffId: id } });
	return { ok: true };
}

async function findFault(
	tx: Queryable,
	grant: Manager,
	{ id, personId }: { id?: string; personId: string | null }
): Promise<'no-such-member' | 'member-taken' | null> {
	if (!personId) return null;
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
	if (!member) return 'no-such-member';
	const same = await tx
		.select({ id: staff.id })
		.from(staff)
		.where(and(eq(staff.labId, grant.labId), eq(staff.personId, personId), isNull(staff.endedAt)));
	return same.some((other) => other.id !== id) ? 'member-taken' : null;
}

function isOwn(grant: Manager, id: string) {
	return and(eq(staff.id, id), eq(staff.labId, grant.labId));
}

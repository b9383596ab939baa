import { and, eq } from 'drizzle-orm';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Database, Queryable } from '$lib/server/db/client';
import { rig, staff, weeklyHours } from '$lib/server/db/schema';
import type { OpenHours } from '$lib/labs/weekly-hours';
import { recordLabEvent } from './record-lab-event';

export type HoursOwner = { rigId: string } | { staffId: string };
export type SetHoursAnswer = { ok: true } | { ok: false; reason: 'no-such-owner' };

/** Replaces the weekly hours of one rig or one staff member. */
export async function setWeeklyHours(
	db: Database,
	clock: Clock,
	grant: Grant<'lab:manage'>,
	{ owner, hours }: { owner: HoursOwner; hours: OpenHours[] }
): Promise<SetHoursAnswer> {
	return db.transaction(async (tx) => {
		if (!(await isOwn(tx, grant, owner))) return { ok: false, reason: 'no-such-owner' };
		await replaceHours(tx, grant, { owner, hours });
		const body = { ...owner, hours };
		await recordLabEvent(tx, clock, grant, { kind: 'hours-set', body });
		return { ok: true };
	});
}

/** Writes the hours in the caller's transaction, which also records them. */
export async function replaceHours(
	tx: Queryable,
	grant: Grant<'lab:manage'>,
	{ owner, hours }: { owner: HoursOwner; hours: OpenHours[] }
): Promise<void> {
	const isTheirs =
		'rigId' in owner ? eq(weeklyHours.rigId, owner.rigId) : eq(weeklyHours.staffId, owner.staffId);
	await tx.delete(weeklyHours).where(and(eq(weeklyHours.labId, grant.labId), isTheirs));
	if (hours.length === 0) return;
	await tx
		.insert(weeklyHours)
		.values(hours.map((open) => ({ labId: grant.labId, ...owner, ...open })));
}

async function isOwn(
	tx: Queryable,
	grant: Grant<'lab:manage'>,
	owner: HoursOwner
): Promise<boolean> {
	const rows =
		'rigId' in owner
			? await tx
					.select({ id: rig.id })
					.from(rig)
					.where(and(eq(rig.id, owner.rigId), eq(rig.labId, grant.labId)))
					.for('update')
			: await tx
					.select({ id: staff.id })
					.from(staff)
					.where(and(eq(staff.id, owner.staffId), eq(staff.labId, grant.labId)))
					.for('update');
	return rows.length === 1;
}

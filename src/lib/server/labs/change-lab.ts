import { and, eq, inArray, sql } from 'drizzle-orm';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Database, Queryable } from '$lib/server/db/client';
import { booking, lab, study } from '$lib/server/db/schema';
import type { LabFacts } from '$lib/labs/lab-schemas';
import { loadLab } from './load-lab';
import { recordLabEvent } from './record-lab-event';

export type ChangeLabAnswer = { ok: true } | { ok: false; reason: 'visits-booked' };

/**
 * Changes what a lab says of itself. The time zone stays while visits are booked: hours, invitations
 * and everybody's plans were made in it.
 */
export async function changeLab(
	db: Database,
	clock: Clock,
	grant: Grant<'lab:manage'>,
	facts: LabFacts
): Promise<ChangeLabAnswer> {
	return db.transaction(async (tx) => {
		const before = await loadLab(tx, grant);
		const movesZone = before.zone !== facts.zone;
		if (movesZone && (await hasVisitsAhead(tx, clock, grant))) {
			return { ok: false, reason: 'visits-booked' };
		}
		const changed = (Object.keys(facts) as (keyof LabFacts)[]).filter(
			(name) => before[name] !== facts[name]
		);
		if (changed.length === 0) return { ok: true };
		await tx.update(lab).set(facts).where(eq(lab.id, grant.labId));
		await recordLabEvent(tx, clock, grant, {
			kind: 'lab-changed',
			body: { changed, ...(movesZone ? { zone: facts.zone } : {}) }
		});
		return { ok: true };
	});
}

type Place = { rigId?: string; staffId?: string; roomId?: string };

/** Whether a visit that is still to come is booked in the lab, or at one place or person of it. */
export async function hasVisitsAhead(
	db: Queryable,
	clock: Clock,
	grant: Grant<'lab:manage'>,
	{ rigId, staffId, roomId }: Place = {}
): Promise<boolean> {
	const studies = db.select({ id: study.id }).from(study).where(eq(study.labId, grant.labId));
	const [row] = await db
		.select({ id: booking.id })
		.from(booking)
		.where(
			and(
				inArray(booking.studyId, studies),
				eq(booking.state, 'booked'),
				sql`upper(${booking.during}) > ${new Date(clock.now()).toISOString()}::timestamptz`,
				rigId ? eq(booking.rigId, rigId) : undefined,
				staffId ? eq(booking.staffId, staffId) : undefined,
				roomId ? eq(booking.roomId, roomId) : undefined
			)
		)
		.limit(1);
	return row !== undefined;
}

import { and, desc, eq, gt, isNotNull, isNull } from 'drizzle-orm';
import { alias } from 'drizzle-orm/pg-core';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import { bundle, person, rig, studyPause } from '$lib/server/db/schema';

export type OpenPause = {
	id: string;
	reason: string;
	pausedBy: string;
	/** Whether the viewer made it. */
	isOwn: boolean;
	pausedAtMs: number;
	/** Who has said that it may end; null while nobody has. */
	firstLiftBy: string | null;
	/** Whether the viewer may be the next of the two who lift it. */
	mayLift: boolean;
};

/** Pauses of the whole study that stand now, newest first. */
export async function listOpenPauses(
	db: Queryable,
	grant: Grant<'study:pause'>
): Promise<OpenPause[]> {
	const lifter = alias(person, 'lifter');
	const rows = await db
		.select({
			pause: studyPause,
			byName: person.name,
			byEmail: person.email,
			lifterName: lifter.name,
			lifterEmail: lifter.email
		})
		.from(studyPause)
		.leftJoin(person, eq(person.id, studyPause.pausedBy))
		.leftJoin(lifter, eq(lifter.id, studyPause.firstLiftBy))
		.where(
			and(
				eq(studyPause.studyId, grant.studyId),
				isNull(studyPause.participantId),
				isNull(studyPause.liftedAt)
			)
		)
		.orderBy(desc(studyPause.pausedAt));
	return rows.map(({ pause, ...who }) => ({
		id: pause.id,
		reason: pause.reason,
		pausedBy: who.byName ?? who.byEmail ?? 'a participant',
		isOwn: pause.pausedBy === grant.personId,
		pausedAtMs: pause.pausedAt.getTime(),
		firstLiftBy: who.lifterName ?? who.lifterEmail,
		mayLift: pause.firstLiftBy !== grant.personId
	}));
}

export type OpenRig = { name: string; expiresAtMs: number };

/**
 * Rigs that hold a revoked block whose hour has not passed: offline they may not have heard of the
 * pause, so somebody must call. One line per rig, by name.
 */
export async function listUnconfirmedRigs(
	db: Queryable,
	clock: Clock,
	grant: Grant<'study:pause'>
): Promise<OpenRig[]> {
	const rows = await db
		.select({ name: rig.name, expiresAt: bundle.expiresAt })
		.from(bundle)
		.innerJoin(rig, eq(rig.id, bundle.rigId))
		.where(
			and(
				eq(bundle.studyId, grant.studyId),
				isNotNull(bundle.revokedAt),
				gt(bundle.expiresAt, new Date(clock.now()))
			)
		)
		.orderBy(rig.name, bundle.expiresAt);
	const latest = new Map(rows.map((row) => [row.name, row.expiresAt.getTime()]));
	return [...latest].map(([name, expiresAtMs]) => ({ name, expiresAtMs }));
}

import { and, eq, isNull, sql } from 'drizzle-orm';
import type { Grant } from '$lib/server/access/require-permission';
import { revokeBundles } from '$lib/server/bundles/revoke-bundles';
import type { Clock } from '$lib/server/clock';
import type { Database, Queryable } from '$lib/server/db/client';
import { studyPause } from '$lib/server/db/schema';
import { sha256Hex } from '$lib/server/record/canonical-json';
import { recordEvent, type Actor } from '$lib/server/record/record-event';
import { pauseLockKey } from './is-paused';

export type PauseOutcome =
	{ ok: true; pauseId: string; revokedCount: number } | { ok: false; reason: 'already-paused' };

/**
 * Stops the whole study at once: nothing is issued and every open bundle is revoked. Any member may
 * do it alone. A second person may add a pause of their own; then each of them must be lifted.
 */
export async function pauseStudy(
	db: Database,
	clock: Clock,
	grant: Grant<'study:pause'>,
	{ reason }: { reason: string }
): Promise<PauseOutcome> {
	const { studyId, personId } = grant;
	return db.transaction((tx) =>
		pause(tx, clock, { studyId, reason, actor: { kind: 'person', personId } })
	);
}

/**
 * Stops everything for one participant, at their own wish or for their safety. The caller has
 * checked that the actor may do so.
 */
export async function pauseParticipant(
	tx: Queryable,
	clock: Clock,
	actor: Actor,
	{ studyId, participantId, reason }: { studyId: string; participantId: string; reason: string }
): Promise<PauseOutcome> {
	return pause(tx, clock, { studyId, participantId, reason, actor });
}

type Pause = { studyId: string; participantId?: string; reason: string; actor: Actor };

async function pause(tx: Queryable, clock: Clock, input: Pause): Promise<PauseOutcome> {
	const { studyId, participantId, reason, actor } = input;
	await tx.execute(sql`select pg_advisory_xact_lock(${pauseLockKey(studyId)})`);
	const personId = actor.kind === 'person' ? actor.personId : null;
	if (await hasOwnPause(tx, { studyId, participantId, personId })) {
		return { ok: false, reason: 'already-paused' };
	}
	const pausedAt = new Date(clock.now());
	const [row] = await tx
		.insert(studyPause)
		.values({ studyId, participantId: participantId ?? null, reason, pausedBy: personId, pausedAt })
		.returning({ id: studyPause.id });
	if (!row) throw new Error('a pause was not stored');
	const revokedCount = await revokeBundles(tx, pausedAt, { studyId, participantId });
	await recordEvent(tx, clock, actor, {
		kind: participantId ? 'participant-paused' : 'study-paused',
		item: participantId ? 'participant-state' : 'protocol-text',
		studyId,
		participantId,
		body: { pauseId: row.id, reasonHash: sha256Hex(reason), revokedCount }
	});
	return { ok: true, pauseId: row.id, revokedCount };
}

type Scope = { studyId: string; participantId?: string | undefined };

/** A second press of the same person changes nothing. */
async function hasOwnPause(
	tx: Queryable,
	{ studyId, participantId, personId }: Scope & { personId: string | null }
): Promise<boolean> {
	const [open] = await tx
		.select({ id: studyPause.id })
		.from(studyPause)
		.where(
			and(
				eq(studyPause.studyId, studyId),
				participantId
					? eq(studyPause.participantId, participantId)
					: isNull(studyPause.participantId),
				personId ? eq(studyPause.pausedBy, personId) : isNull(studyPause.pausedBy),
				isNull(studyPause.liftedAt)
			)
		);
	return open !== undefined;
}

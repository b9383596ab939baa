import { and, eq, isNull, sql } from 'drizzle-orm';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Database } from '$lib/server/db/client';
import { studyPause } from '$lib/server/db/schema';
import { actorOf, recordEvent } from '$lib/server/record/record-event';
import { pauseLockKey } from './is-paused';

export type LiftOutcome =
	| { ok: true; state: 'waits-for-second' | 'lifted' }
	| { ok: false; reason: 'no-such-pause' | 'same-person' };

/** Says that a pause may end. It ends when a second, different person has said so too. */
export async function liftPause(
	db: Database,
	clock: Clock,
	grant: Grant<'pause:lift'>,
	{ pauseId }: { pauseId: string }
): Promise<LiftOutcome> {
	const { studyId, personId } = grant;
	return db.transaction(async (tx): Promise<LiftOutcome> => {
		await tx.execute(sql`select pg_advisory_xact_lock(${pauseLockKey(studyId)})`);
		const open = and(
			eq(studyPause.id, pauseId),
			eq(studyPause.studyId, studyId),
			isNull(studyPause.liftedAt)
		);
		const [pause] = await tx.select().from(studyPause).where(open);
		if (!pause) return { ok: false, reason: 'no-such-pause' };
		if (pause.firstLiftBy === personId) return { ok: false, reason: 'same-person' };
		const isSecond = pause.firstLiftBy !== null;
		const change = isSecond
			? { secondLiftBy: personId, liftedAt: new Date(clock.now()) }
			: { firstLiftBy: personId };
		await tx.update(studyPause).set(change).where(open);
		await recordEvent(tx, clock, actorOf(grant), {
			kind: isSecond ? 'pause-lifted' : 'pause-lift-asked',
			item: pause.participantId ? 'participant-state' : 'protocol-text',
			studyId,
			participantId: pause.participantId ?? undefined,
			body: { pauseId }
		});
		return { ok: true, state: isSecond ? 'lifted' : 'waits-for-second' };
	});
}

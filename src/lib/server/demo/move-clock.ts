import { asc } from 'drizzle-orm';
import type { Clock } from '$lib/server/clock';
import type { Database, Queryable } from '$lib/server/db/client';
import { lab } from '$lib/server/db/schema';
import { loadInstance, moveDemoClock } from '$lib/server/instance/load-instance';
import { addDaysToDate } from '$lib/time/add-local-days';
import { localToInstants, oneInstant } from '$lib/time/local-to-instants';
import { localDateOf } from '$lib/time/wall-clock';
import type { DemoGrant } from './require-demo';

const hourMs = 3_600_000;
const daysMax = 400;

export type ClockMove =
	| { by: 'hour' }
	| { by: 'morning' }
	/** `local` is the lab's clock time, such as 2027-03-12T08:00. */
	| { by: 'instant'; local: string };
export type MoveAnswer =
	{ ok: true; nowMs: number } | { ok: false; reason: 'not-forward' | 'too-far' | 'clock-gap' };

/** Moves the demo clock forward: by an hour, to tomorrow 08:00, or to a time of the lab's clock. */
export async function moveClock(
	db: Database,
	clock: Clock,
	_grant: DemoGrant,
	move: ClockMove
): Promise<MoveAnswer> {
	const nowMs = clock.now();
	const target = findTarget(nowMs, await loadDemoZone(db), move);
	if (target === null) return { ok: false, reason: 'clock-gap' };
	if (target <= nowMs) return { ok: false, reason: 'not-forward' };
	if (target - nowMs > daysMax * 24 * hourMs) return { ok: false, reason: 'too-far' };
	const instance = await loadInstance(db);
	if (!instance) throw new Error('a demo has an instance row');
	await moveDemoClock(db, instance.clockOffsetMs + target - nowMs);
	return { ok: true, nowMs: target };
}

/** The zone that the demo's times are read in: that of its first lab. */
export async function loadDemoZone(db: Queryable): Promise<string> {
	const [row] = await db.select({ zone: lab.zone }).from(lab).orderBy(asc(lab.createdAt)).limit(1);
	return row?.zone ?? 'UTC';
}

function findTarget(nowMs: number, zone: string, move: ClockMove): number | null {
	if (move.by === 'hour') return nowMs + hourMs;
	if (move.by === 'morning') {
		const tomorrow = addDaysToDate(localDateOf(nowMs, zone), 1);
		return localToInstants(`${tomorrow}T08:00`, zone)[0] ?? null;
	}
	const found = oneInstant(move.local, zone);
	if (found.ok) return found.instantMs;
	// A time that the clock shows twice: the first that is still ahead.
	if (found.reason === 'clock-gap') return null;
	return found.instantsMs.find((atMs) => atMs > nowMs) ?? found.instantsMs[1];
}

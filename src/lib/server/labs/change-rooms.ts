import { and, eq } from 'drizzle-orm';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Database, Queryable } from '$lib/server/db/client';
import { booking, rig, room } from '$lib/server/db/schema';
import { recordLabEvent } from './record-lab-event';

type RoomFacts = { name: string; directions: string };
type Manager = Grant<'lab:manage'>;

export async function addRoom(
	db: Database,
	clock: Clock,
	grant: Manager,
	facts: RoomFacts
): Promise<{ id: string }> {
	return db.transaction(async (tx) => {
		const [row] = await tx
			.insert(room)
			.values({ labId: grant.labId, ...facts })
			.returning({ id: room.id });
		if (!row) throw new Error('an inserted room has an id');
		const body = { roomId: row.id, name: facts.name };
		await recordLabEvent(tx, clock, grant, { kind: 'room-added', body });
		return row;
	});
}

export async function changeRoom(
	db: Database,
	clock: Clock,
	grant: Manager,
	{ id, ...facts }: RoomFacts & { id: string }
): Promise<{ ok: true } | { ok: false; reason: 'no-such-room' }> {
	return db.transaction(async (tx) => {
		const changed = await tx.update(room).set(facts).where(isOwn(grant, id)).returning();
		if (changed.length === 0) return { ok: false, reason: 'no-such-room' };
		await recordLabEvent(tx, clock, grant, {
			kind: 'room-changed',
			body: { roomId: id, name: facts.name }
		});
		return { ok: true };
	});
}

export type RemoveRoomAnswer =
	| { ok: true; removed: RoomFacts }
	| { ok: false; reason: 'no-such-room' | 'has-rigs' | 'has-visits' };

/** Removes a room in which nothing stands and nothing was ever booked. */
export async function removeRoom(
	db: Database,
	clock: Clock,
	grant: Manager,
	id: string
): Promise<RemoveRoomAnswer> {
	return db.transaction(async (tx) => {
		const [found] = await tx.select().from(room).where(isOwn(grant, id)).for('update');
		if (!found) return { ok: false, reason: 'no-such-room' };
		if (await stands(tx, id)) return { ok: false, reason: 'has-rigs' };
		const [visit] = await tx.select().from(booking).where(eq(booking.roomId, id)).limit(1);
		if (visit) return { ok: false, reason: 'has-visits' };
		await tx.delete(room).where(eq(room.id, id));
		await recordLabEvent(tx, clock, grant, {
			kind: 'room-removed',
			body: { roomId: id, name: found.name }
		});
		return { ok: true, removed: { name: found.name, directions: found.directions } };
	});
}

async function stands(tx: Queryable, roomId: string): Promise<boolean> {
	const [row] = await tx.select({ id: rig.id }).from(rig).where(eq(rig.roomId, roomId)).limit(1);
	return row !== undefined;
}

function isOwn(grant: Manager, id: string) {
	return and(eq(room.id, id), eq(room.labId, grant.labId));
}

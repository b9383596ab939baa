import { createPublicKey } from 'node:crypto';
import { and, eq, isNull } from 'drizzle-orm';
import { calculateJwkThumbprint } from 'jose';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Database, Queryable } from '$lib/server/db/client';
import { rig, room, type RigLimits } from '$lib/server/db/schema';
import type { RigFacts } from '$lib/labs/lab-schemas';
import type { RigPublicKey } from '$lib/labs/rig-key';
import { parseVariableLimits } from '$lib/labs/variable-limits';
import { hasVisitsAhead } from './change-lab';
import { recordLabEvent } from './record-lab-event';

type Manager = Grant<'lab:manage'>;
export type ChangeRigAnswer =
	| { ok: true; id: string }
	| { ok: false; reason: 'no-such-rig' | 'no-such-room' | 'name-taken' | 'visits-booked' };

export async function addRig(
	db: Database,
	clock: Clock,
	grant: Manager,
	facts: RigFacts
): Promise<ChangeRigAnswer> {
	return db.transaction(async (tx) => {
		const fault = await findFault(tx, grant, facts);
		if (fault) return { ok: false, reason: fault };
		const { name, roomId } = facts;
		const limits = limitsOf(facts);
		const [row] = await tx
			.insert(rig)
			.values({ labId: grant.labId, roomId, name, limits })
			.returning({ id: rig.id });
		if (!row) throw new Error('an inserted rig has an id');
		const body = { rigId: row.id, name, roomId, limits };
		await recordLabEvent(tx, clock, grant, { kind: 'rig-added', body });
		return { ok: true, id: row.id };
	});
}

/** Changes name, room and limits. A rig with visits ahead stays in its room: they name the room. */
export async function changeRig(
	db: Database,
	clock: Clock,
	grant: Manager,
	{ id, ...facts }: RigFacts & { id: string }
): Promise<ChangeRigAnswer> {
	return db.transaction(async (tx) => {
		const [found] = await tx.select().from(rig).where(isOwn(grant, id)).for('update');
		if (!found) return { ok: false, reason: 'no-such-rig' };
		const fault = await findFault(tx, grant, { ...facts, id });
		if (fault) return { ok: false, reason: fault };
		const { name, roomId } = facts;
		if (roomId !== found.roomId && (await hasVisitsAhead(tx, clock, grant, { rigId: id }))) {
			return { ok: false, reason: 'visits-booked' };
		}
		const limits = limitsOf(facts);
		await tx.update(rig).set({ name, roomId, limits }).where(eq(rig.id, id));
		const body = { rigId: id, name, roomId, limits };
		await recordLabEvent(tx, clock, grant, { kind: 'rig-changed', body });
		return { ok: true, id };
	});
}

export type SetKeyAnswer =
	{ ok: true; keyId: string } | { ok: false; reason: 'no-such-rig' | 'not-on-curve' };

/** Keeps a rig's public key; blocks are encrypted to it from now on. */
export async function setRigKey(
	db: Database,
	clock: Clock,
	grant: Manager,
	{ id, key }: { id: string; key: RigPublicKey }
): Promise<SetKeyAnswer> {
	if (!isOnCurve(key)) return { ok: false, reason: 'not-on-curve' };
	const keyId = await calculateJwkThumbprint(key);
	return db.transaction(async (tx) => {
		const kept = { ...key, kid: keyId, alg: 'ECDH-ES', use: 'enc' };
		const changed = await tx
			.update(rig)
			.set({ publicKey: kept })
			.where(isOwn(grant, id))
			.returning({ id: rig.id });
		if (changed.length === 0) return { ok: false, reason: 'no-such-rig' };
		await recordLabEvent(tx, clock, grant, { kind: 'rig-key-set', body: { rigId: id, keyId } });
		return { ok: true, keyId };
	});
}

export type RetireAnswer = { ok: true } | { ok: false; reason: 'no-such-rig' | 'visits-booked' };

/** Takes a rig out of planning. Visits booked on it must be moved first. */
export async function retireRig(
	db: Database,
	clock: Clock,
	grant: Manager,
	id: string
): Promise<RetireAnswer> {
	return db.transaction(async (tx) => {
		if (await hasVisitsAhead(tx, clock, grant, { rigId: id })) {
			return { ok: false, reason: 'visits-booked' };
		}
		return setRetired(tx, clock, grant, { id, retiredAt: new Date(clock.now()) });
	});
}

export async function restoreRig(
	db: Database,
	clock: Clock,
	grant: Manager,
	id: string
): Promise<RetireAnswer> {
	return db.transaction((tx) => setRetired(tx, clock, grant, { id, retiredAt: null }));
}

async function setRetired(
	tx: Queryable,
	clock: Clock,
	grant: Manager,
	{ id, retiredAt }: { id: string; retiredAt: Date | null }
): Promise<RetireAnswer> {
	const changed = await tx.update(rig).set({ retiredAt }).where(isOwn(grant, id)).returning();
	if (changed.length === 0) return { ok: false, reason: 'no-such-rig' };
	const kind = retiredAt ? 'rig-retired' : 'rig-restored';
	await recordLabEvent(tx, clock, grant, { kind, body: { rigId: id } });
	return { ok: true };
}

async function findFault(
	tx: Queryable,
	grant: Manager,
	{ id, name, roomId }: { id?: string; name: string; roomId: string }
): Promise<'no-such-room' | 'name-taken' | null> {
	const [place] = await tx
		.select({ id: room.id })
		.from(room)
		.where(and(eq(room.id, roomId), eq(room.labId, grant.labId)));
	if (!place) return 'no-such-room';
	const named = await tx
		.select({ id: rig.id, name: rig.name })
		.from(rig)
		.where(and(eq(rig.labId, grant.labId), isNull(rig.retiredAt)));
	const isTaken = named.some(
		(other) => other.id !== id && other.name.toLowerCase() === name.toLowerCase()
	);
	return isTaken ? 'name-taken' : null;
}

function limitsOf(facts: RigFacts): RigLimits {
	const found = parseVariableLimits(facts.variableMax);
	if (!found.ok) throw new TypeError('limits are parsed before they come here');
	const { isPowered, minutesPerVisit, trialsPerVisit, shiftMax, penaltyShareMax } = facts;
	return {
		...{ isPowered, minutesPerVisit, trialsPerVisit, variableMax: found.variableMax },
		...(shiftMax === null ? {} : { shiftMax }),
		...(penaltyShareMax === null ? {} : { penaltyShareMax })
	};
}

function isOnCurve(key: RigPublicKey): boolean {
	try {
		createPublicKey({ key, format: 'jwk' });
		return true;
	} catch {
		return false;
	}
}

function isOwn(grant: Manager, id: string) {
	return and(eq(rig.id, id), eq(rig.labId, grant.labId));
}

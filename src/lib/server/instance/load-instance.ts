import { eq } from 'drizzle-orm';
import type { Queryable } from '$lib/server/db/client';
import { instance } from '$lib/server/db/schema';

export type InstanceKind = 'demo' | 'rehearsal' | 'own';
export type Instance = { kind: InstanceKind; clockOffsetMs: number };

/** What made this database; null before the seed has run. */
export async function loadInstance(db: Queryable): Promise<Instance | null> {
	const [row] = await db
		.select({ kind: instance.kind, clockOffsetMs: instance.clockOffsetMs })
		.from(instance);
	return row ?? null;
}

/** Moves the demo clock to `offsetMs` from the system's clock. It only ever goes forward. */
export async function moveDemoClock(db: Queryable, offsetMs: number): Promise<void> {
	const found = await loadInstance(db);
	if (!found || found.kind === 'own') throw new Error('only a demo has a clock to move');
	if (offsetMs < found.clockOffsetMs) throw new RangeError('the demo clock only goes forward');
	await db.update(instance).set({ clockOffsetMs: offsetMs }).where(eq(instance.onlyRow, true));
}

/**
 * Whether the mode of this process fits the database it was given.
 *
 * @throws {Error} demo mode on a database that the demo seed did not make, or the other way round
 */
export function requireMatchingMode(mode: 'demo' | 'own', found: Instance | null): Instance {
	if (!found) {
		throw new Error('The database has not been prepared: run the seed (npm start does) first.');
	}
	const isDemoData = found.kind !== 'own';
	if (mode === 'demo' && !isDemoData) {
		throw new Error(
			'Demo mode refuses this database: the demo seed did not make it. Start without demo mode, or give another DATABASE_URL.'
		);
	}
	if (mode === 'own' && isDemoData) {
		throw new Error(
			'This database holds demo data. Start it with npm start, or give another DATABASE_URL.'
		);
	}
	return found;
}

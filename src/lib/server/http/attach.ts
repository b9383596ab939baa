import { building } from '$app/environment';
import type { Handle } from '@sveltejs/kit';
import { and, eq, gt } from 'drizzle-orm';
import { sessionCookieName } from '$lib/server/auth/session-cookie';
import { createClock } from '$lib/server/clock';
import { config } from '$lib/server/config';
import type { Database } from '$lib/server/db/client';
import { person, session } from '$lib/server/db/schema';
import {
	loadInstance,
	requireMatchingMode,
	type Instance
} from '$lib/server/instance/load-instance';
import { runtimeDatabase } from '$lib/server/runtime';

let own: Instance | undefined;

/** Fills `event.locals`: database, clock, and who is signed in. */
export const attach: Handle = async ({ event, resolve }) => {
	if (building) return resolve(event);
	const db = runtimeDatabase();
	const instance = await currentInstance(db);
	event.locals.db = db;
	event.locals.instanceKind = instance.kind;
	event.locals.clock = createClock(instance.clockOffsetMs);
	const token = event.cookies.get(sessionCookieName(config().ORIGIN)) ?? null;
	event.locals.sessionToken = token;
	event.locals.person = token ? await findPerson(db, token) : null;
	return resolve(event);
};

async function currentInstance(db: Database): Promise<Instance> {
	if (own) return own;
	const found = requireMatchingMode(config().OVALRY_MODE, await loadInstance(db));
	if (found.kind === 'own') own = found;
	return found;
}

async function findPerson(db: Database, token: string): Promise<App.Locals['person']> {
	const [row] = await db
		.select({ id: person.id, name: person.name, email: person.email })
		.from(session)
		.innerJoin(person, eq(person.id, session.userId))
		.where(and(eq(session.sessionToken, token), gt(session.expires, new Date())));
	return row ? { id: row.id, name: row.name ?? row.email, email: row.email } : null;
}

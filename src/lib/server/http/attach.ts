import { building } from '$app/environment';
import type { Handle } from '@sveltejs/kit';
import { sessionCookieName } from '$lib/server/auth/session-cookie';
import { findSessionPerson } from '$lib/server/auth/sessions';
import { createClock } from '$lib/server/clock';
import { config } from '$lib/server/config';
import type { Database } from '$lib/server/db/client';
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
	event.locals.person = token ? await findSessionPerson(db, token) : null;
	return resolve(event);
};

async function currentInstance(db: Database): Promise<Instance> {
	if (own) return own;
	const found = requireMatchingMode(config().OVALRY_MODE, await loadInstance(db));
	if (found.kind === 'own') own = found;
	return found;
}

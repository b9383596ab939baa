import { createHash, randomBytes } from 'node:crypto';
import { and, desc, eq, gt, lt } from 'drizzle-orm';
import type { Grant } from '$lib/server/access/require-permission';
import { systemClock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import { person, session } from '$lib/server/db/schema';
import { describeBrowser } from './describe-browser';

/** Sessions end this long after sign-in, whatever was done meanwhile. */
export const sessionHours = 12;
const sessionMs = sessionHours * 3_600_000;

export type StartedSession = { token: string; expiresAt: Date };

/** A new secret for a session's cookie. */
export function makeSessionToken(): string {
	return randomBytes(32).toString('base64url');
}

/** Under which a session's token is stored: the database never holds what a cookie holds. */
export function hashSessionToken(token: string): string {
	return createHash('sha256').update(token).digest('hex');
}

type Start = { personId: string; userAgent: string; token?: string };

/**
 * Signs a person in: stores a session and gives the token for the browser's cookie. Sessions run on
 * the system's clock, as cookies do, not on the demo clock.
 */
export async function startSession(
	db: Queryable,
	{ personId, userAgent, token = makeSessionToken() }: Start
): Promise<StartedSession> {
	const now = new Date(systemClock.now());
	const expiresAt = new Date(now.getTime() + sessionMs);
	await db.delete(session).where(lt(session.expires, now));
	await db.insert(session).values({
		sessionToken: hashSessionToken(token),
		userId: personId,
		expires: expiresAt,
		startedAt: now,
		browser: describeBrowser(userAgent)
	});
	return { token, expiresAt };
}

/** Ends the session of one cookie; a token that is no longer known is fine. */
export async function endSession(db: Queryable, token: string): Promise<void> {
	await db.delete(session).where(eq(session.sessionToken, hashSessionToken(token)));
}

/** Ends every session of a person, at once and in every browser. */
export async function endSessionsOf(db: Queryable, personId: string): Promise<void> {
	await db.delete(session).where(eq(session.userId, personId));
}

/** Who is signed in with this cookie's token; null when nobody, or the session has ended. */
export async function findSessionPerson(
	db: Queryable,
	token: string
): Promise<App.Locals['person']> {
	const [row] = await db
		.select({ id: person.id, name: person.name, email: person.email })
		.from(session)
		.innerJoin(person, eq(person.id, session.userId))
		.where(
			and(
				eq(session.sessionToken, hashSessionToken(token)),
				gt(session.expires, new Date(systemClock.now()))
			)
		);
	return row ? { id: row.id, name: row.name ?? row.email, email: row.email } : null;
}

export type OwnSession = {
	/** Names the session in a form; not the token, and opens nothing. */
	id: string;
	browser: string;
	startedAt: Date;
	endsAt: Date;
	isThisOne: boolean;
};

/** The person's own running sessions, newest first. */
export async function listOwnSessions(
	db: Queryable,
	grant: Grant<'account:manage'>,
	currentToken: string | null
): Promise<OwnSession[]> {
	const current = currentToken ? hashSessionToken(currentToken) : '';
	const rows = await db
		.select()
		.from(session)
		.where(
			and(eq(session.userId, grant.personId), gt(session.expires, new Date(systemClock.now())))
		)
		.orderBy(desc(session.startedAt));
	return rows.map((row) => ({
		id: row.sessionToken,
		browser: row.browser || 'Unknown browser',
		startedAt: row.startedAt,
		endsAt: row.expires,
		isThisOne: row.sessionToken === current
	}));
}

/** Ends one of the person's own sessions, named by its id in the list. */
export async function endOwnSession(
	db: Queryable,
	grant: Grant<'account:manage'>,
	id: string
): Promise<void> {
	await db
		.delete(session)
		.where(and(eq(session.userId, grant.personId), eq(session.sessionToken, id)));
}

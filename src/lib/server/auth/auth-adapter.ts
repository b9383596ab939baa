import type { Adapter, AdapterAccount, AdapterUser } from '@auth/core/adapters';
import { DrizzleAdapter } from '@auth/drizzle-adapter';
import { eq, lt } from 'drizzle-orm';
import { systemClock } from '$lib/server/clock';
import type { Database } from '$lib/server/db/client';
import { account, person, session, verificationToken } from '$lib/server/db/schema';
import { normalizeEmail } from '$lib/members/normalize-email';
import { endSession, startSession } from './sessions';

/**
 * What Auth.js reads and writes. Three things differ from its Drizzle adapter: nobody is created by
 * signing in, sessions are stored as hashes, and of another institution's sign-on only the person's
 * number there is kept, none of its tokens.
 */
export function createAuthAdapter(db: Database, userAgent: string): Adapter {
	const drizzle = DrizzleAdapter(db, {
		usersTable: person,
		accountsTable: account,
		sessionsTable: session,
		verificationTokensTable: verificationToken
	} as never) as Adapter;
	return {
		...drizzle,
		...sessionsOf(db, userAgent),
		createUser: () => {
			throw new Error('people are invited by a steward, never made by signing in');
		},
		getUserByEmail: (email) => findPersonByEmail(db, email),
		linkAccount: async ({ userId, type, provider, providerAccountId }: AdapterAccount) => {
			await db.insert(account).values({ userId, type, provider, providerAccountId });
		},
		createVerificationToken: async (link) => {
			await db
				.delete(verificationToken)
				.where(lt(verificationToken.expires, new Date(systemClock.now())));
			await db.insert(verificationToken).values(link);
			return link;
		}
	};
}

function sessionsOf(db: Database, userAgent: string): Partial<Adapter> {
	return {
		createSession: async ({ sessionToken, userId }) => {
			const start = { personId: userId, userAgent, token: sessionToken };
			const { expiresAt } = await startSession(db, start);
			return { sessionToken, userId, expires: expiresAt };
		},
		// Whoever is signed in already has no part in a new sign-in: nothing is joined to their account.
		getSessionAndUser: async () => null,
		updateSession: async () => null,
		deleteSession: (token) => endSession(db, token)
	};
}

async function findPersonByEmail(db: Database, email: string): Promise<AdapterUser | null> {
	const [row] = await db
		.select({
			id: person.id,
			name: person.name,
			email: person.email,
			emailVerified: person.emailVerified
		})
		.from(person)
		.where(eq(person.email, normalizeEmail(email)));
	return row ?? null;
}

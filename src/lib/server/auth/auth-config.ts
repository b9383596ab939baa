import type { SvelteKitAuthConfig } from '@auth/sveltekit';
import Nodemailer from '@auth/sveltekit/providers/nodemailer';
import type { Clock } from '$lib/server/clock';
import type { Settings } from '$lib/server/config';
import type { Database } from '$lib/server/db/client';
import { logger } from '$lib/server/http/logger';
import { acceptMemberships, findMemberByEmail } from '$lib/server/members/find-member';
import { createAuthAdapter } from './auth-adapter';
import { sendSignInLink } from './send-sign-in-link';
import { endSession, makeSessionToken, sessionHours } from './sessions';

export const linkMinutes = 30;

type Options = {
	db: Database;
	settings: Settings;
	clock: Clock;
	userAgent: string;
	/** The session this browser had before; a new sign-in ends it. */
	earlierToken: string | null;
};

/** Sign-in by a mailed link or by the university's own sign-on. Sessions live in the database. */
export function createAuthConfig(options: Options): SvelteKitAuthConfig {
	const { db, settings, clock, userAgent, earlierToken } = options;
	return {
		adapter: createAuthAdapter(db, userAgent),
		secret: settings.AUTH_SECRET,
		basePath: '/auth',
		trustHost: true,
		session: {
			strategy: 'database',
			maxAge: sessionHours * 3600,
			generateSessionToken: makeSessionToken
		},
		pages: { signIn: '/signin', verifyRequest: '/signin/sent', error: '/signin' },
		providers: [mailedLink(db, settings), ...universitySignOn(settings)],
		callbacks: { signIn: (attempt) => maySignIn(db, attempt) },
		events: {
			signIn: async ({ user }) => {
				if (earlierToken) await endSession(db, earlierToken);
				if (user.email) await acceptMemberships(db, clock, user.email);
			}
		},
		logger: {
			// Names only: messages and causes may hold addresses and tokens.
			error: (error) => logger().warn({ signIn: 'refused', fault: error.name }),
			warn: () => {},
			debug: () => {}
		}
	};
}

type Attempt = {
	user: { email?: string | null };
	account?: { provider: string } | null;
	profile?: { email?: string | null; email_verified?: boolean | null };
	email?: { verificationRequest?: boolean };
};

/**
 * A link may be asked for with any address, without telling whether it is known; only members get
 * in. A university must have checked the address itself, or anybody could claim a member's there.
 */
async function maySignIn(db: Database, attempt: Attempt): Promise<boolean> {
	if (attempt.email?.verificationRequest) return true;
	if (attempt.account?.provider === universityId && attempt.profile?.email_verified !== true) {
		logger().warn({ signIn: 'refused', fault: 'email_verified is not true' });
		return false;
	}
	const email = attempt.user.email;
	return email ? (await findMemberByEmail(db, email)) !== null : false;
}

function mailedLink(db: Database, settings: Settings) {
	return Nodemailer({
		// Never used: the mail is sent by `sendSignInLink`.
		server: 'smtp://unused.invalid',
		from: settings.MAIL_FROM,
		maxAge: linkMinutes * 60,
		sendVerificationRequest: ({ identifier, url }) => {
			// Not waited for: the answer takes as long for an unknown address as for a known one.
			void sendSignInLink({ db, settings, email: identifier, callbackUrl: url }).catch(
				(error: unknown) =>
					logger().error({
						signIn: 'mail failed',
						fault: error instanceof Error ? error.name : 'unknown'
					})
			);
			return Promise.resolve();
		}
	});
}

export const universityId = 'university';

function universitySignOn(settings: Settings) {
	if (!settings.OIDC_ISSUER) return [];
	return [
		{
			id: universityId,
			name: settings.OIDC_LABEL,
			type: 'oidc' as const,
			issuer: settings.OIDC_ISSUER,
			clientId: settings.OIDC_CLIENT_ID ?? '',
			clientSecret: settings.OIDC_CLIENT_SECRET ?? '',
			checks: ['pkce' as const, 'state' as const, 'nonce' as const],
			// The lab chose this issuer itself, so its verified address may join an invited person.
			allowDangerousEmailAccountLinking: true
		}
	];
}

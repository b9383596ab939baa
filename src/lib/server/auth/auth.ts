import { DrizzleAdapter } from '@auth/drizzle-adapter';
import { SvelteKitAuth, type SvelteKitAuthConfig } from '@auth/sveltekit';
import type { Adapter } from '@auth/core/adapters';
import Nodemailer from '@auth/sveltekit/providers/nodemailer';
import { config, type Settings } from '$lib/server/config';
import { account, person, session, verificationToken } from '$lib/server/db/schema';
import { acceptMemberships, findMemberByEmail } from '$lib/server/members/find-member';
import { runtimeDatabase } from '$lib/server/runtime';
import { sendSignInLink } from './send-sign-in-link';

const hoursToSeconds = 3600;
const linkMinutes = 30;

/** Sign-in by a mailed link or by the university's own sign-on. Sessions live in the database. */
export const { handle, signIn, signOut } = SvelteKitAuth(async () => createAuthConfig(config()));

function createAuthConfig(settings: Settings): SvelteKitAuthConfig {
	const db = runtimeDatabase();
	return {
		adapter: DrizzleAdapter(db, {
			usersTable: person,
			accountsTable: account,
			sessionsTable: session,
			verificationTokensTable: verificationToken
		} as never) as Adapter,
		secret: settings.AUTH_SECRET,
		basePath: '/auth',
		trustHost: true,
		session: { strategy: 'database', maxAge: 12 * hoursToSeconds, updateAge: hoursToSeconds },
		pages: { signIn: '/signin', verifyRequest: '/signin/sent', error: '/signin' },
		providers: [
			Nodemailer({
				server: 'smtp://unused.invalid',
				from: settings.MAIL_FROM,
				maxAge: linkMinutes * 60,
				sendVerificationRequest: ({ identifier, url }) =>
					sendSignInLink({ db, settings, email: identifier, callbackUrl: url })
			}),
			...universityProviders(settings)
		],
		callbacks: {
			// A link is asked for without saying whether the address is known; only members get in.
			signIn: async ({ user, email }) =>
				email?.verificationRequest === true ||
				(user.email ? (await findMemberByEmail(db, user.email)) !== null : false)
		},
		events: {
			signIn: async ({ user }) => {
				if (user.email) await acceptMemberships(db, user.email);
			}
		},
		logger: {
			error: (error) => console.error(`sign-in: ${error.name}`),
			warn: () => {},
			debug: () => {}
		}
	};
}

function universityProviders(settings: Settings) {
	if (!settings.OIDC_ISSUER) return [];
	return [
		{
			id: 'university',
			name: settings.OIDC_LABEL,
			type: 'oidc' as const,
			issuer: settings.OIDC_ISSUER,
			clientId: settings.OIDC_CLIENT_ID ?? '',
			clientSecret: settings.OIDC_CLIENT_SECRET ?? '',
			// The lab chose this issuer itself, so its verified address may join an invited person.
			allowDangerousEmailAccountLinking: true
		}
	];
}

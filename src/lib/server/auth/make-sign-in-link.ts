import { createHash, randomBytes } from 'node:crypto';
import { systemClock } from '$lib/server/clock';
import type { Settings } from '$lib/server/config';
import type { Queryable } from '$lib/server/db/client';
import { verificationToken } from '$lib/server/db/schema';

type Wanted = { email: string; to: string; validMinutes: number };
export type SignInLink = { link: string; expiresAtMs: number };

/**
 * A link that signs in whoever reads the mail at this address, once. It opens the page with the
 * button, as a sign-in link asked for does.
 */
export async function makeSignInLink(
	db: Queryable,
	settings: Settings,
	{ email, to, validMinutes }: Wanted
): Promise<SignInLink> {
	const token = randomBytes(32).toString('base64url');
	const expiresAtMs = systemClock.now() + validMinutes * 60_000;
	await db.insert(verificationToken).values({
		identifier: email,
		token: hashLinkToken(token, settings.AUTH_SECRET),
		expires: new Date(expiresAtMs)
	});
	const callbackUrl = new URL(to, settings.ORIGIN).toString();
	return { link: confirmAddress(settings, { callbackUrl, token, email }), expiresAtMs };
}

/** The page with the button that leads on to where the link is used. */
export function confirmAddress(settings: Settings, link: Record<string, string>): string {
	const confirm = new URL('/signin/confirm', settings.ORIGIN);
	confirm.search = new URLSearchParams(link).toString();
	return confirm.toString();
}

/** How Auth.js stores a link's token. */
function hashLinkToken(token: string, secret: string): string {
	return createHash('sha256').update(`${token}${secret}`).digest('hex');
}

import type { Cookies } from '@sveltejs/kit';
import type { StartedSession } from './sessions';

/** Name of the cookie in which the session's token is kept; Auth.js uses the same. */
export function sessionCookieName(origin: string): string {
	return origin.startsWith('https:') ? '__Secure-authjs.session-token' : 'authjs.session-token';
}

/** Gives a started session to the browser: never readable by a page, never sent from other sites. */
export function setSessionCookie(
	cookies: Cookies,
	origin: string,
	{ token, expiresAt }: StartedSession
): void {
	cookies.set(sessionCookieName(origin), token, { ...cookieOptions(origin), expires: expiresAt });
}

export function clearSessionCookie(cookies: Cookies, origin: string): void {
	cookies.delete(sessionCookieName(origin), cookieOptions(origin));
}

function cookieOptions(origin: string) {
	return {
		path: '/',
		httpOnly: true,
		sameSite: 'lax',
		secure: origin.startsWith('https:')
	} as const;
}

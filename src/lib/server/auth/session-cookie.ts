/** Name of the cookie in which Auth.js keeps the session's token. */
export function sessionCookieName(origin: string): string {
	return origin.startsWith('https:') ? '__Secure-authjs.session-token' : 'authjs.session-token';
}

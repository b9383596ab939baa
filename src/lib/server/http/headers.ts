import type { Handle } from '@sveltejs/kit';
import { config } from '$lib/server/config';

const fixed: Record<string, string> = {
	'x-content-type-options': 'nosniff',
	'x-frame-options': 'DENY',
	'cross-origin-opener-policy': 'same-origin',
	'cross-origin-resource-policy': 'same-origin',
	'permissions-policy': 'camera=(), microphone=(), geolocation=(), payment=(), usb=()'
};

/** Security headers on every answer; pages are never kept by caches. */
export const headers: Handle = async ({ event, resolve }) => {
	const answer = await resolve(event);
	// Redirects made by Auth.js have headers that cannot be changed: copy first.
	const response = new Response(answer.body, answer);
	for (const [name, value] of Object.entries(fixed)) response.headers.set(name, value);
	response.headers.set('referrer-policy', referrerPolicy(event.url.pathname));
	if (!response.headers.has('cache-control'))
		response.headers.set('cache-control', 'private, no-store');
	const settings = config();
	if (settings.ORIGIN.startsWith('https:')) {
		response.headers.set('strict-transport-security', 'max-age=31536000; includeSubDomains');
	}
	allowSignOn(response, event.url.pathname, settings.OIDC_ISSUER);
	return response;
};

/**
 * No address with its path, so no token in it, ever goes out as a referrer. Forms that post must say
 * which site they come from, or they are refused as foreign: `no-referrer` takes that away as well.
 */
function referrerPolicy(path: string): string {
	return path === '/signin/confirm' ? 'no-referrer' : 'strict-origin';
}

/** The browser applies form-action to redirects too: the sign-in form ends at the issuer. */
function allowSignOn(response: Response, path: string, issuer: string | undefined): void {
	const policy = response.headers.get('content-security-policy');
	if (!policy || !issuer || !(path === '/' || path.startsWith('/signin'))) return;
	const allowed = `form-action 'self' ${new URL(issuer).origin}`;
	response.headers.set('content-security-policy', policy.replace("form-action 'self'", allowed));
}

import type { Handle } from '@sveltejs/kit';
import { config } from '$lib/server/config';

const fixed: Record<string, string> = {
	'referrer-policy': 'no-referrer',
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
	if (!response.headers.has('cache-control'))
		response.headers.set('cache-control', 'private, no-store');
	const settings = config();
	if (settings.ORIGIN.startsWith('https:')) {
		response.headers.set('strict-transport-security', 'max-age=31536000; includeSubDomains');
	}
	allowSignOn(response, event.url.pathname, settings.OIDC_ISSUER);
	return response;
};

/** The browser applies form-action to redirects too: the sign-in form ends at the issuer. */
function allowSignOn(response: Response, path: string, issuer: string | undefined): void {
	const policy = response.headers.get('content-security-policy');
	if (!policy || !issuer || !(path === '/' || path.startsWith('/signin'))) return;
	const allowed = `form-action 'self' ${new URL(issuer).origin}`;
	response.headers.set('content-security-policy', policy.replace("form-action 'self'", allowed));
}

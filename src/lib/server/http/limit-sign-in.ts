import type { Handle } from '@sveltejs/kit';
import { mayTry } from './limit-rate';

/** Too many tries at signing in from one place are refused for ten minutes. */
export const limitSignIn: Handle = async ({ event, resolve }) => {
	const path = event.url.pathname;
	const isTry =
		(event.request.method === 'POST' && path === '/signin') || path.startsWith('/auth/callback/');
	if (!isTry || (await mayTry('sign-in', event.getClientAddress()))) return resolve(event);
	return new Response('Too many tries at signing in. Wait ten minutes, then ask for a new link.', {
		status: 429,
		headers: { 'content-type': 'text/plain; charset=utf-8', 'retry-after': '600' }
	});
};

import type { Handle } from '@sveltejs/kit';
import { randomUUID } from 'node:crypto';
import { logger } from './logger';

/** Gives each request an id and one log line: method, route, status, duration. No address, no person. */
export const observe: Handle = async ({ event, resolve }) => {
	const startedAt = performance.now();
	event.locals.requestId = randomUUID();
	event.locals.path = event.url.pathname + event.url.search;
	const response = await resolve(event);
	logger().info({
		requestId: event.locals.requestId,
		method: event.request.method,
		// The route's pattern, never the address: tokens and codes stand in addresses.
		route: event.route.id ?? 'none',
		status: response.status,
		ms: Math.round(performance.now() - startedAt)
	});
	return response;
};

import { json } from '@sveltejs/kit';
import { requirePermission } from '$lib/server/access/require-permission';
import { loadToday } from '$lib/server/waiting/load-today';
import type { RequestHandler } from './$types';

/** What waits and today's visits, for the open page to look again. */
export const GET: RequestHandler = async ({ locals, params }) => {
	const grant = await requirePermission(locals, 'today:read', params);
	return json(await loadToday(locals.db, locals.clock, grant));
};

import { json } from '@sveltejs/kit';
import { requirePermission } from '$lib/server/access/require-permission';
import { loadMessageList } from '$lib/server/waiting/load-message-list';
import type { RequestHandler } from './$types';

/** What was sent and what waits, for the open page to look again. */
export const GET: RequestHandler = async ({ locals, params }) => {
	const grant = await requirePermission(locals, 'message:read', params);
	return json(await loadMessageList(locals.db, locals.clock, grant));
};

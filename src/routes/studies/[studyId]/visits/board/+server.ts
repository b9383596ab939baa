import { json } from '@sveltejs/kit';
import { requirePermission } from '$lib/server/access/require-permission';
import { runtimeKeys } from '$lib/server/runtime';
import { loadVisitBoard } from '$lib/server/visits/load-visit-board';
import type { RequestHandler } from './$types';

/** Today's and tomorrow's visits, for the open page to look again. */
export const GET: RequestHandler = async ({ locals, params }) => {
	const grant = await requirePermission(locals, 'visit:run', params);
	return json(await loadVisitBoard(locals.db, locals.clock, grant, runtimeKeys()));
};

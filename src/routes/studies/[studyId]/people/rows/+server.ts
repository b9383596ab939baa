import { json } from '@sveltejs/kit';
import { requirePermission } from '$lib/server/access/require-permission';
import { loadPeopleList } from '$lib/server/people/load-people-list';
import type { RequestHandler } from './$types';

/** The list of people, for the open page to look again. */
export const GET: RequestHandler = async ({ locals, params }) => {
	const grant = await requirePermission(locals, 'participant:list', params);
	return json(await loadPeopleList(locals.db, locals.clock, grant));
};

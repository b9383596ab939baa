import { requirePermission } from '$lib/server/access/require-permission';
import { openContacts } from '$lib/server/people/load-contacts';
import { runtimeKeys } from '$lib/server/runtime';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => {
	const grant = await requirePermission(locals, 'participant:list', params);
	const contacts = await openContacts(locals.db, locals.clock, grant, { keys: runtimeKeys() });
	return { studyId: grant.studyId, contacts };
};

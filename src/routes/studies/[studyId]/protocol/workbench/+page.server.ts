import { requirePermission } from '$lib/server/access/require-permission';
import { loadRehearsal } from '$lib/server/protocols/load-rehearsal';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => {
	const grant = await requirePermission(locals, 'protocol:rehearse', params);
	return {
		rehearsal: await loadRehearsal(locals.db, grant),
		nowMs: locals.clock.now(),
		mayEdit: grant.roles.includes('investigator')
	};
};

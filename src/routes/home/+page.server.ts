import type { PageServerLoad } from './$types';
import { requirePermission } from '$lib/server/access/require-permission';
import { loadHome } from '$lib/server/home/load-home';

export const load: PageServerLoad = async ({ locals }) => {
	const grant = await requirePermission(locals, 'home:read');
	return {
		labs: await loadHome(locals.db, locals.clock, grant, (permission, place) =>
			requirePermission(locals, permission, place)
		),
		nowMs: locals.clock.now(),
		firstName: grant.personName.split(' ')[0] ?? grant.personName
	};
};

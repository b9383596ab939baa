import { requirePermission } from '$lib/server/access/require-permission';
import { runtimeKeys } from '$lib/server/runtime';
import { loadVisitBoard } from '$lib/server/visits/load-visit-board';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => {
	const grant = await requirePermission(locals, 'visit:run', params);
	return {
		board: await loadVisitBoard(locals.db, locals.clock, grant, runtimeKeys()),
		studyId: grant.studyId
	};
};

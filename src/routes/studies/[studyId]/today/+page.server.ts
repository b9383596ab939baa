import { requirePermission } from '$lib/server/access/require-permission';
import { runtimeKeys } from '$lib/server/runtime';
import { loadVisitBoard } from '$lib/server/visits/load-visit-board';
import { loadCounts } from '$lib/server/waiting/load-counts';
import { loadOutlook } from '$lib/server/waiting/load-outlook';
import { loadToday } from '$lib/server/waiting/load-today';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => {
	const grant = await requirePermission(locals, 'today:read', params);
	const { db, clock } = locals;
	const board = grant.roles.includes('operator')
		? await loadVisitBoard(
				db,
				clock,
				await requirePermission(locals, 'visit:run', params),
				runtimeKeys()
			)
		: null;
	return {
		studyId: grant.studyId,
		roles: grant.roles,
		today: await loadToday(db, clock, grant),
		outlook: await loadOutlook(db, clock, grant),
		counts: await loadCounts(db, clock, grant),
		board
	};
};

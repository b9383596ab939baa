import { requirePermission } from '$lib/server/access/require-permission';
import { listDecisions } from '$lib/server/decisions/list-decisions';
import { replayAllDecisions } from '$lib/server/decisions/replay-all-decisions';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => {
	const grant = await requirePermission(locals, 'decision:read', params);
	const mayReplay =
		grant.roles.includes('approver') || grant.roles.includes('unblinded-statistician');
	return { ...(await listDecisions(locals.db, grant)), studyId: grant.studyId, mayReplay };
};

export const actions: Actions = {
	replay: async ({ locals, params }) => {
		const grant = await requirePermission(locals, 'decision:replay', params);
		return { replayed: await replayAllDecisions(locals.db, grant.studyId) };
	}
};

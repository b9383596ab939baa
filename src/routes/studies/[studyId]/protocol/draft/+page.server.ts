import { redirect } from '@sveltejs/kit';
import { requirePermission } from '$lib/server/access/require-permission';
import { loadDraft, loadRigLimits } from '$lib/server/protocols/load-draft';
import { loadTasks } from '$lib/server/tasks/load-tasks';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => {
	const grant = await requirePermission(locals, 'protocol:edit', params);
	const loaded = await loadDraft(locals.db, grant);
	if (!loaded) redirect(303, `/studies/${grant.studyId}/protocol`);
	const kept = await loadTasks(locals.db, grant);
	return {
		...loaded,
		rigs: await loadRigLimits(locals.db, grant.labId),
		tasks: kept.map(({ id, name, version, record }) => ({ id, name, version, record })),
		tasksHref: `/lab/${grant.labId}/tasks`
	};
};

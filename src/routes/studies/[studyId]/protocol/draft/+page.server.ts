import { redirect } from '@sveltejs/kit';
import { requirePermission } from '$lib/server/access/require-permission';
import { loadDraft, loadRigLimits } from '$lib/server/protocols/load-draft';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => {
	const grant = await requirePermission(locals, 'protocol:edit', params);
	const loaded = await loadDraft(locals.db, grant);
	if (!loaded) redirect(303, `/studies/${grant.studyId}/protocol`);
	return { ...loaded, rigs: await loadRigLimits(locals.db, grant.labId) };
};

import { fail, redirect } from '@sveltejs/kit';
import { z } from 'zod';
import { requirePermission } from '$lib/server/access/require-permission';
import { freezeVersion } from '$lib/server/protocols/freeze-version';
import { loadDraft, loadRigLimits } from '$lib/server/protocols/load-draft';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => {
	const grant = await requirePermission(locals, 'protocol:edit', params);
	const loaded = await loadDraft(locals.db, grant);
	if (!loaded) redirect(303, `/studies/${grant.studyId}/protocol`);
	return { ...loaded, rigs: await loadRigLimits(locals.db, grant.labId) };
};

const freezeSchema = z.object({
	number: z.coerce.number().int(),
	revision: z.coerce.number().int()
});

export const actions: Actions = {
	freeze: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'protocol:freeze', params);
		const input = freezeSchema.safeParse(Object.fromEntries(await request.formData()));
		if (!input.success) return fail(400, { refused: 'stale' as const });
		const frozen = await freezeVersion(locals.db, locals.clock, grant, input.data);
		if (frozen.ok) redirect(303, `/studies/${grant.studyId}/protocol?frozen=${frozen.number}`);
		return fail(409, { refused: frozen.reason });
	}
};

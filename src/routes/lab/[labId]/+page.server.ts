import { fail } from '@sveltejs/kit';
import { message, setError, superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import type { Actions, PageServerLoad } from './$types';
import { requirePermission } from '$lib/server/access/require-permission';
import { changeLab } from '$lib/server/labs/change-lab';
import { findLabGaps, loadLab } from '$lib/server/labs/load-lab';
import { labSchema } from '$lib/labs/lab-schemas';
import { zoneNames } from '$lib/time/is-valid-zone';

export const load: PageServerLoad = async ({ locals, params }) => {
	const grant = await requirePermission(locals, 'lab:read', params);
	const facts = await loadLab(locals.db, grant);
	return {
		facts,
		mayChange: grant.isSteward,
		gaps: grant.isSteward ? await findLabGaps(locals.db, grant) : [],
		zones: grant.isSteward ? zoneNames() : [],
		form: await superValidate(facts, zod4(labSchema), { errors: false })
	};
};

export const actions: Actions = {
	default: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'lab:manage', params);
		const form = await superValidate(request, zod4(labSchema));
		if (!form.valid) return fail(400, { form });
		const answer = await changeLab(locals.db, locals.clock, grant, form.data);
		if (answer.ok) return message(form, 'Kept.');
		return setError(
			form,
			'zone',
			'Visits are booked ahead, in the zone as it is. It can be changed once they are over or cancelled.'
		);
	}
};

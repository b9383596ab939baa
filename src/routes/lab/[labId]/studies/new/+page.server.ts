import { redirect } from '@sveltejs/kit';
import { setError, superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { newStudySchema } from '$lib/protocol/new-study';
import { requirePermission } from '$lib/server/access/require-permission';
import { createStudy } from '$lib/server/studies/create-study';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => {
	await requirePermission(locals, 'study:create', params);
	return { form: await superValidate(zod4(newStudySchema), { errors: false }) };
};

export const actions: Actions = {
	default: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'study:create', params);
		const form = await superValidate(request, zod4(newStudySchema));
		if (!form.valid) return { form };
		const made = await createStudy(locals.db, locals.clock, grant, form.data);
		if (!made.ok) {
			const text = `Another study of this lab already uses ${form.data.codePrefix.toUpperCase()}; choose other letters.`;
			return setError(form, 'codePrefix', text);
		}
		redirect(303, `/studies/${made.studyId}/protocol/draft`);
	}
};

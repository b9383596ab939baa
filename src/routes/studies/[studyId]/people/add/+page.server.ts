import { redirect } from '@sveltejs/kit';
import { setError, superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { enrolmentSchema } from '$lib/people/enrolment-form';
import { requirePermission } from '$lib/server/access/require-permission';
import { loadCellDefaults } from '$lib/server/people/check-rows';
import { enrolPeople } from '$lib/server/people/enrol-people';
import { runtimeKeys } from '$lib/server/runtime';
import { findMissingGates } from '$lib/server/studies/load-gates';
import { zoneNames } from '$lib/time/is-valid-zone';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => {
	const grant = await requirePermission(locals, 'participant:enrol', params);
	const defaults = await loadCellDefaults(locals.db, grant);
	const start = { zone: defaults.zone, language: defaults.language, availability: 'any' };
	return {
		studyId: grant.studyId,
		form: await superValidate(start, zod4(enrolmentSchema), { errors: false }),
		zones: zoneNames(),
		gates: await findMissingGates(locals.db, locals.clock, grant.studyId)
	};
};

export const actions: Actions = {
	default: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'participant:enrol', params);
		const form = await superValidate(request, zod4(enrolmentSchema));
		const outcome = await enrolPeople(locals.db, locals.clock, grant, {
			keys: runtimeKeys(),
			rows: [{ line: 1, cells: form.data }]
		});
		if (!outcome.ok) return setError(form, '', outcome.gates.map(({ text }) => text).join(' '));
		const faults = outcome.stayed[0]?.faults ?? [];
		for (const { column, message, suggestion } of faults) {
			setError(form, column, suggestion ? `${message}; ${suggestion}?` : message);
		}
		if (faults.length > 0) return { form };
		redirect(303, `/studies/${grant.studyId}/people?view=all&find=${outcome.codes[0] ?? ''}`);
	}
};

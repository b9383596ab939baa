import { fail } from '@sveltejs/kit';
import { message, setError, superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import type { Actions, PageServerLoad } from './$types';
import { requirePermission } from '$lib/server/access/require-permission';
import { addStaff, restoreStaff } from '$lib/server/labs/change-staff';
import { loadStaff } from '$lib/server/labs/load-lab';
import { listMemberNames } from '$lib/server/members/list-members';
import { staffFaults } from '$lib/labs/staff-faults';
import { rowSchema, staffSchema } from '$lib/labs/lab-schemas';
import { parseWeeklyHours } from '$lib/labs/weekly-hours';

export const load: PageServerLoad = async ({ locals, params }) => {
	const grant = await requirePermission(locals, 'lab:read', params);
	const people = await loadStaff(locals.db, grant);
	const usual = { hours: 'Mon-Fri 09:00-17:00' };
	return {
		labId: grant.labId,
		mayChange: grant.isSteward,
		staff: people.map(({ personId, ...shown }) => ({ ...shown, canSignIn: personId !== null })),
		members: grant.isSteward ? await listMemberNames(locals.db, grant.labId) : [],
		form: await superValidate(usual, zod4(staffSchema), { errors: false })
	};
};

export const actions: Actions = {
	add: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'lab:manage', params);
		const form = await superValidate(request, zod4(staffSchema));
		const found = parseWeeklyHours(form.data.hours);
		if (!form.valid || !found.ok) return fail(400, { form });
		const { name, personId } = form.data;
		const facts = { name, personId: personId || null, hours: found.hours };
		const answer = await addStaff(locals.db, locals.clock, grant, facts);
		if (answer.ok) return message(form, `${name} is added.`);
		return setError(form, 'personId', staffFaults[answer.reason]);
	},
	restore: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'lab:manage', params);
		const row = rowSchema.safeParse(Object.fromEntries(await request.formData()));
		const gone = { refused: 'They are not in the list any more.' };
		if (!row.success) return fail(400, gone);
		const answer = await restoreStaff(locals.db, locals.clock, grant, row.data.id);
		return answer.ok ? { notice: 'They can be booked again.' } : fail(400, gone);
	}
};

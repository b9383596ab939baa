import { error, fail, redirect } from '@sveltejs/kit';
import { message, setError, superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { z } from 'zod';
import type { Actions, PageServerLoad } from './$types';
import { requirePermission } from '$lib/server/access/require-permission';
import { changeStaff, endStaff } from '$lib/server/labs/change-staff';
import { loadStaff } from '$lib/server/labs/load-lab';
import { listMemberNames } from '$lib/server/members/list-members';
import { staffFaults } from '$lib/labs/staff-faults';
import { staffSchema } from '$lib/labs/lab-schemas';
import { formatWeeklyHours, parseWeeklyHours } from '$lib/labs/weekly-hours';

export const load: PageServerLoad = async ({ locals, params }) => {
	const grant = await requirePermission(locals, 'lab:manage', params);
	const found = (await loadStaff(locals.db, grant)).find((one) => one.id === params.staffId);
	if (!found || found.hasEnded) error(404, 'Not found');
	const { name, personId, hours } = found;
	const facts = { name, personId: personId ?? '', hours: formatWeeklyHours(hours) };
	return {
		labId: grant.labId,
		name,
		members: await listMemberNames(locals.db, grant.labId),
		form: await superValidate(facts, zod4(staffSchema), { errors: false })
	};
};

export const actions: Actions = {
	facts: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'lab:manage', params);
		const form = await superValidate(request, zod4(staffSchema));
		const found = parseWeeklyHours(form.data.hours);
		if (!form.valid || !found.ok) return fail(400, { form });
		const { name, personId } = form.data;
		const { hours } = found;
		const facts = { id: readId(params.staffId), name, personId: personId || null, hours };
		const answer = await changeStaff(locals.db, locals.clock, grant, facts);
		if (answer.ok) {
			return message(form, 'Kept. Visits already booked stay where they are.');
		}
		if (answer.reason === 'no-such-staff') error(404, 'Not found');
		return setError(form, 'personId', staffFaults[answer.reason]);
	},
	end: async ({ locals, params }) => {
		const grant = await requirePermission(locals, 'lab:manage', params);
		const answer = await endStaff(locals.db, locals.clock, grant, readId(params.staffId));
		if (answer.ok) redirect(303, `/lab/${grant.labId}/staff`);
		if (answer.reason === 'no-such-staff') error(404, 'Not found');
		return fail(400, {
			refused:
				'Visits are booked with them. Ask the coordinators to give these to somebody else first.'
		});
	}
};

function readId(text: string): string {
	const id = z.uuid().safeParse(text);
	return id.success ? id.data : error(404, 'Not found');
}

import { fail, redirect } from '@sveltejs/kit';
import { setError, superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import type { Actions, PageServerLoad } from './$types';
import { requirePermission } from '$lib/server/access/require-permission';
import { addRig } from '$lib/server/labs/change-rigs';
import { loadRooms } from '$lib/server/labs/load-lab';
import { explainRigFault } from '$lib/labs/explain-rig-fault';
import { rigSchema } from '$lib/labs/lab-schemas';

export const load: PageServerLoad = async ({ locals, params }) => {
	const grant = await requirePermission(locals, 'lab:manage', params);
	const rooms = await loadRooms(locals.db, grant);
	const first = rooms.length === 1 ? { roomId: rooms[0]?.id ?? '' } : {};
	return {
		labId: grant.labId,
		rooms: rooms.map(({ id, name }) => ({ id, name })),
		form: await superValidate(first, zod4(rigSchema), { errors: false })
	};
};

export const actions: Actions = {
	default: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'lab:manage', params);
		const form = await superValidate(request, zod4(rigSchema));
		if (!form.valid) return fail(400, { form });
		const answer = await addRig(locals.db, locals.clock, grant, form.data);
		if (!answer.ok) return setError(form, ...explainRigFault(answer.reason));
		redirect(303, `/lab/${grant.labId}/rigs/${answer.id}?new=1`);
	}
};

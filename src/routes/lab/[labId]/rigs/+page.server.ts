import { fail } from '@sveltejs/kit';
import { message, superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { z } from 'zod';
import type { Actions, PageServerLoad } from './$types';
import { requirePermission } from '$lib/server/access/require-permission';
import { restoreRig } from '$lib/server/labs/change-rigs';
import { addRoom, changeRoom, removeRoom } from '$lib/server/labs/change-rooms';
import { loadRigs, loadRooms } from '$lib/server/labs/load-lab';
import { roomSchema, rowSchema } from '$lib/labs/lab-schemas';

const keepSchema = roomSchema.extend({ id: z.union([z.literal(''), z.uuid()]).default('') });

export const load: PageServerLoad = async ({ locals, params, url }) => {
	const grant = await requirePermission(locals, 'lab:read', params);
	const rooms = await loadRooms(locals.db, grant);
	const chosen = rooms.find((room) => room.id === url.searchParams.get('room'));
	return {
		labId: grant.labId,
		mayChange: grant.isSteward,
		rooms,
		rigs: (await loadRigs(locals.db, grant)).map(({ publicKey, ...rig }) => ({
			...rig,
			hasKey: publicKey !== null
		})),
		changes: chosen?.name ?? null,
		form: await superValidate(chosen ?? {}, zod4(keepSchema), { errors: false })
	};
};

const refusals = {
	'no-such-room': 'That room is not in the list any more.',
	'has-rigs': 'A rig stands in this room, or a retired one did. Put it into another room first.',
	'has-visits':
		'Visits were booked in this room; it stays for the record. Give it another name if it is no longer used.'
};

export const actions: Actions = {
	room: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'lab:manage', params);
		const form = await superValidate(request, zod4(keepSchema));
		if (!form.valid) return fail(400, { form });
		const { id, ...facts } = form.data;
		if (id === '') {
			await addRoom(locals.db, locals.clock, grant, facts);
			return message(form, `${facts.name} is added.`);
		}
		const answer = await changeRoom(locals.db, locals.clock, grant, { id, ...facts });
		if (!answer.ok) return message(form, refusals[answer.reason], { status: 400 });
		return message(form, `${facts.name} is changed.`);
	},
	removeRoom: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'lab:manage', params);
		const row = rowSchema.safeParse(Object.fromEntries(await request.formData()));
		if (!row.success) return fail(400, { refused: refusals['no-such-room'] });
		const answer = await removeRoom(locals.db, locals.clock, grant, row.data.id);
		if (!answer.ok) return fail(400, { refused: refusals[answer.reason] });
		return { removedRoom: answer.removed };
	},
	restoreRoom: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'lab:manage', params);
		const facts = roomSchema.safeParse(Object.fromEntries(await request.formData()));
		if (!facts.success) return fail(400, { refused: 'The room could not be put back.' });
		await addRoom(locals.db, locals.clock, grant, facts.data);
		return { notice: `${facts.data.name} is back.` };
	},
	restoreRig: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'lab:manage', params);
		const row = rowSchema.safeParse(Object.fromEntries(await request.formData()));
		const gone = { refused: 'That rig is not in the list any more.' };
		if (!row.success) return fail(400, gone);
		const answer = await restoreRig(locals.db, locals.clock, grant, row.data.id);
		return answer.ok ? { notice: 'The rig can be booked again.' } : fail(400, gone);
	}
};

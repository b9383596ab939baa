import { error, fail, redirect } from '@sveltejs/kit';
import { message, setError, superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { z } from 'zod';
import type { Actions, PageServerLoad } from './$types';
import { requirePermission } from '$lib/server/access/require-permission';
import { changeRig, retireRig, setRigKey } from '$lib/server/labs/change-rigs';
import { loadRigs, loadRooms } from '$lib/server/labs/load-lab';
import { setWeeklyHours } from '$lib/server/labs/set-weekly-hours';
import { explainRigFault } from '$lib/labs/explain-rig-fault';
import { hoursSchema, rigKeySchema, rigSchema } from '$lib/labs/lab-schemas';
import { readRigKey } from '$lib/labs/rig-key';
import { formatVariableLimits } from '$lib/labs/variable-limits';
import { formatWeeklyHours, parseWeeklyHours } from '$lib/labs/weekly-hours';

const defaultHours = 'Mon-Fri 09:00-17:00';

export const load: PageServerLoad = async ({ locals, params, url }) => {
	const grant = await requirePermission(locals, 'lab:read', params);
	const rigs = await loadRigs(locals.db, grant);
	const rig = rigs.find((one) => one.id === params.rigId);
	if (!rig) error(404, 'Not found');
	const { name, roomId, limits, hours } = rig;
	const facts = {
		name,
		roomId,
		...limits,
		variableMax: formatVariableLimits(limits.variableMax),
		shiftMax: limits.shiftMax ?? null,
		penaltyShareMax: limits.penaltyShareMax ?? null,
		// Asked for at every change: whoever changes limits has had them checked.
		limitsChecked: false
	};
	const isNew = url.searchParams.has('new') && hours.length === 0;
	const typedHours = isNew ? defaultHours : formatWeeklyHours(hours);
	const { publicKey, ...shown } = rig;
	return {
		labId: grant.labId,
		mayChange: grant.isSteward,
		isNew,
		rig: shown,
		keyId: typeof publicKey?.kid === 'string' ? publicKey.kid : null,
		rooms: (await loadRooms(locals.db, grant)).map((room) => ({ id: room.id, name: room.name })),
		others: rigs
			.filter((one) => one.id !== rig.id && one.hours.length > 0)
			.map((one) => ({ name: one.name, hours: formatWeeklyHours(one.hours) })),
		factsForm: await superValidate(facts, zod4(rigSchema), { id: 'facts', errors: false }),
		hoursForm: await superValidate({ hours: typedHours }, zod4(hoursSchema), { id: 'hours' }),
		keyForm: await superValidate(zod4(rigKeySchema), { id: 'key' })
	};
};

export const actions: Actions = {
	facts: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'lab:manage', params);
		const form = await superValidate(request, zod4(rigSchema), { id: 'facts' });
		if (!form.valid) return fail(400, { form });
		const id = readId(params.rigId);
		const answer = await changeRig(locals.db, locals.clock, grant, { id, ...form.data });
		if (!answer.ok) return setError(form, ...explainRigFault(answer.reason));
		return message(form, 'Kept. Blocks issued from now on obey these limits.');
	},
	hours: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'lab:manage', params);
		const form = await superValidate(request, zod4(hoursSchema), { id: 'hours' });
		const found = parseWeeklyHours(form.data.hours);
		if (!form.valid || !found.ok) return fail(400, { form });
		const owner = { rigId: readId(params.rigId) };
		const { hours } = found;
		const answer = await setWeeklyHours(locals.db, locals.clock, grant, { owner, hours });
		if (!answer.ok) error(404, 'Not found');
		form.data.hours = formatWeeklyHours(hours);
		return message(
			form,
			'These hours hold from now on. Visits already booked stay where they are.'
		);
	},
	key: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'lab:manage', params);
		const form = await superValidate(request, zod4(rigKeySchema), { id: 'key' });
		const found = readRigKey(form.data.publicKey);
		if (!form.valid || !found.ok) return fail(400, { form });
		const wanted = { id: readId(params.rigId), key: found.key };
		const answer = await setRigKey(locals.db, locals.clock, grant, wanted);
		if (answer.ok) return message(form, `Kept. Its number is ${answer.keyId}.`);
		if (answer.reason === 'no-such-rig') error(404, 'Not found');
		return setError(
			form,
			'publicKey',
			'The key’s x and y are no point of the curve. Copy the text once more.'
		);
	},
	retire: async ({ locals, params }) => {
		const grant = await requirePermission(locals, 'lab:manage', params);
		const id = readId(params.rigId);
		const answer = await retireRig(locals.db, locals.clock, grant, id);
		if (answer.ok) redirect(303, `/lab/${grant.labId}/rigs`);
		if (answer.reason === 'no-such-rig') error(404, 'Not found');
		return fail(400, {
			refused: 'Visits are booked on it. Ask the coordinators to move or cancel them first.'
		});
	}
};

function readId(text: string): string {
	const id = z.uuid().safeParse(text);
	return id.success ? id.data : error(404, 'Not found');
}

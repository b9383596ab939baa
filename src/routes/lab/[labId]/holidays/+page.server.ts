import { fail } from '@sveltejs/kit';
import { message, superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import type { Actions, PageServerLoad } from './$types';
import { requirePermission } from '$lib/server/access/require-permission';
import { addHolidays, removeHoliday } from '$lib/server/labs/change-holidays';
import { loadHolidays, loadLab } from '$lib/server/labs/load-lab';
import { parseHolidayLines } from '$lib/labs/holiday-lines';
import { holidaysSchema, rowSchema } from '$lib/labs/lab-schemas';
import { localDateOf } from '$lib/time/wall-clock';

export const load: PageServerLoad = async ({ locals, params }) => {
	const grant = await requirePermission(locals, 'lab:read', params);
	const { zone } = await loadLab(locals.db, grant);
	const today = localDateOf(locals.clock.now(), zone);
	return {
		mayChange: grant.isSteward,
		zone,
		holidays: await loadHolidays(locals.db, grant, today),
		form: await superValidate(zod4(holidaysSchema))
	};
};

export const actions: Actions = {
	add: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'lab:manage', params);
		const form = await superValidate(request, zod4(holidaysSchema));
		const found = parseHolidayLines(form.data.lines);
		if (!form.valid || !found.ok) return fail(400, { form });
		await addHolidays(locals.db, locals.clock, grant, found.holidays);
		const count = found.holidays.length;
		return message(form, count === 1 ? '1 day is closed.' : `${count} days are closed.`);
	},
	remove: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'lab:manage', params);
		const row = rowSchema.safeParse(Object.fromEntries(await request.formData()));
		const gone = { refused: 'That day is not in the list any more.' };
		if (!row.success) return fail(400, gone);
		const answer = await removeHoliday(locals.db, locals.clock, grant, row.data.id);
		return answer.ok ? { removed: answer.removed } : fail(400, gone);
	}
};

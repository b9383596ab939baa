import { fail, redirect } from '@sveltejs/kit';
import { message, superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { z } from 'zod';
import type { Actions, PageServerLoad } from './$types';
import { requirePermission } from '$lib/server/access/require-permission';
import { explainRefusal } from '$lib/server/tasks/explain-refusal';
import { keepTask } from '$lib/server/tasks/keep-task';
import { loadTask } from '$lib/server/tasks/load-tasks';
import { exampleFormula, getDefaultTask } from '$lib/tasks/default-tasks';
import { keepTaskSchema, readSentDraft } from '$lib/tasks/keep-task-schema';
import { isTaskType } from '$lib/tasks/task-models';

export const load: PageServerLoad = async ({ locals, params, url }) => {
	const grant = await requirePermission(locals, 'lab-task:keep', params);
	const from = z.uuid().safeParse(url.searchParams.get('from'));
	const copied = from.success ? await loadTask(locals.db, grant, from.data) : null;
	const type = url.searchParams.get('model') ?? 'puck';
	const fresh =
		isTaskType(type) && type !== 'formula'
			? getDefaultTask(type)
			: type === 'formula'
				? exampleFormula
				: getDefaultTask('puck');
	return {
		labId: grant.labId,
		record: copied?.record ?? fresh,
		copiedFrom: copied ? `${copied.name}, version ${copied.version}` : null,
		form: await superValidate(zod4(keepTaskSchema), { errors: false })
	};
};

export const actions: Actions = {
	keep: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'lab-task:keep', params);
		const form = await superValidate(request, zod4(keepTaskSchema));
		const draft = readSentDraft(form.data.draft);
		if (!form.valid || !draft) return fail(400, { form });
		const { name, note } = form.data;
		const input = { name, note, draft, basedOn: null };
		const answer = await keepTask(locals.db, locals.clock, grant, input);
		if (!answer.ok) return message(form, explainRefusal(answer), { status: 400 });
		redirect(303, `/lab/${grant.labId}/tasks/${answer.id}?kept=${answer.version}`);
	}
};

import { error, fail, redirect } from '@sveltejs/kit';
import { message, superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { z } from 'zod';
import type { Actions, PageServerLoad } from './$types';
import { requirePermission } from '$lib/server/access/require-permission';
import { loadLab } from '$lib/server/labs/load-lab';
import { explainRefusal } from '$lib/server/tasks/explain-refusal';
import { keepTask } from '$lib/server/tasks/keep-task';
import { loadTask, loadTasks } from '$lib/server/tasks/load-tasks';
import { keepTaskSchema, readSentDraft } from '$lib/tasks/keep-task-schema';
import { listTaskDifferences } from '$lib/tasks/list-task-differences';
import { formatWithZone } from '$lib/time/format-instant';

export const load: PageServerLoad = async ({ locals, params, url }) => {
	const grant = await requirePermission(locals, 'lab:read', params);
	const id = z.uuid().safeParse(params.taskId);
	const shown = id.success ? await loadTask(locals.db, grant, id.data) : null;
	if (!shown) error(404, 'Not found');
	const { zone } = await loadLab(locals.db, grant);
	const all = (await loadTasks(locals.db, grant)).filter(({ name }) => name === shown.name);
	const before = all.find(({ version }) => version === shown.version - 1);
	const newest = all[0]?.version ?? shown.version;
	return {
		labId: grant.labId,
		task: { id: shown.id, name: shown.name, version: shown.version, record: shown.record },
		newest,
		justKept: url.searchParams.get('kept') === String(shown.version),
		versions: all.map(({ id: versionId, version, note, keptBy, keptAtMs }) => ({
			...{ id: versionId, version, note, keptBy, keptAt: formatWithZone(keptAtMs, zone) }
		})),
		differences: before ? listTaskDifferences(before.record, shown.record) : null,
		form: await superValidate({ name: shown.name, basedOn: newest }, zod4(keepTaskSchema), {
			errors: false
		})
	};
};

export const actions: Actions = {
	keep: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'lab-task:keep', params);
		const form = await superValidate(request, zod4(keepTaskSchema));
		const draft = readSentDraft(form.data.draft);
		if (!form.valid || !draft) return fail(400, { form });
		const { name, note, basedOn } = form.data;
		const answer = await keepTask(locals.db, locals.clock, grant, { name, note, draft, basedOn });
		if (!answer.ok) return message(form, explainRefusal(answer), { status: 400 });
		redirect(303, `/lab/${grant.labId}/tasks/${answer.id}?kept=${answer.version}`);
	}
};

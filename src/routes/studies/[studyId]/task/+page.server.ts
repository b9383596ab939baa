import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import type { PageServerLoad } from './$types';
import { requirePermission } from '$lib/server/access/require-permission';
import { loadStudyTask } from '$lib/server/tasks/load-study-task';
import { keepTaskSchema } from '$lib/tasks/keep-task-schema';

export const load: PageServerLoad = async ({ locals, params }) => {
	const grant = await requirePermission(locals, 'task:read', params);
	return {
		...(await loadStudyTask(locals.db, grant)),
		studyId: grant.studyId,
		labId: grant.labId,
		mayEdit: grant.roles.includes('investigator'),
		form: await superValidate(zod4(keepTaskSchema), { errors: false })
	};
};

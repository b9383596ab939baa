import type { PageServerLoad } from './$types';
import { requirePermission } from '$lib/server/access/require-permission';
import { loadTasks } from '$lib/server/tasks/load-tasks';
import { loadLab } from '$lib/server/labs/load-lab';
import { formatWithZone } from '$lib/time/format-instant';

export const load: PageServerLoad = async ({ locals, params }) => {
	const grant = await requirePermission(locals, 'lab:read', params);
	const { zone } = await loadLab(locals.db, grant);
	const versions = await loadTasks(locals.db, grant);
	return {
		labId: grant.labId,
		versions: versions.map(({ keptAtMs, ...version }) => ({
			...version,
			keptAt: formatWithZone(keptAtMs, zone)
		}))
	};
};

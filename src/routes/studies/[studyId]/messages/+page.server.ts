import { requirePermission } from '$lib/server/access/require-permission';
import { loadMessageList } from '$lib/server/waiting/load-message-list';
import { messageViews } from '$lib/people/message-list';
import { findMissingGates } from '$lib/server/studies/load-gates';
import { z } from 'zod';
import type { PageServerLoad } from './$types';

const viewSchema = z.enum(messageViews).catch('all');

export const load: PageServerLoad = async ({ locals, params, url }) => {
	const grant = await requirePermission(locals, 'message:read', params);
	return {
		studyId: grant.studyId,
		view: viewSchema.parse(url.searchParams.get('view') ?? 'all'),
		list: await loadMessageList(locals.db, locals.clock, grant),
		gates: await findMissingGates(locals.db, locals.clock, grant.studyId)
	};
};

import { z } from 'zod';
import { requirePermission } from '$lib/server/access/require-permission';
import { loadRecord } from '$lib/server/record/load-record';
import type { PageServerLoad } from './$types';

const beforeSchema = z.coerce.number().int().positive().nullable().catch(null);

export const load: PageServerLoad = async ({ locals, params, url }) => {
	const grant = await requirePermission(locals, 'record:read', params);
	const before = beforeSchema.parse(url.searchParams.get('before'));
	return { record: await loadRecord(locals.db, grant, { before }), isFirst: before === null };
};

import { error, json } from '@sveltejs/kit';
import { requirePermission } from '$lib/server/access/require-permission';
import { previewRows } from '$lib/server/people/preview-rows';
import { runtimeKeys } from '$lib/server/runtime';
import type { RequestHandler } from './$types';
import { rowsSchema } from '../rows-form';

/** Checks rows while somebody mends a cell; stores nothing. */
export const POST: RequestHandler = async ({ locals, params, request }) => {
	const grant = await requirePermission(locals, 'participant:enrol', params);
	const rows = rowsSchema.safeParse(await request.json().catch(() => null));
	if (!rows.success) error(422, 'Rows of cells are expected');
	return json(await previewRows(locals.db, grant, { keys: runtimeKeys(), rows: rows.data }));
};

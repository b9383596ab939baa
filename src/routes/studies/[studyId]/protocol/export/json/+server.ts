import { error } from '@sveltejs/kit';
import { z } from 'zod';
import { requirePermission } from '$lib/server/access/require-permission';
import { exportProtocol } from '$lib/server/protocols/export-protocol';
import type { RequestHandler } from './$types';

/** A frozen version as a file that can be imported again. */
export const GET: RequestHandler = async ({ locals, params, url }) => {
	const grant = await requirePermission(locals, 'protocol:export', params);
	const number = z.coerce.number().int().positive().safeParse(url.searchParams.get('version'));
	const exported = number.success
		? await exportProtocol(locals.db, grant, { number: number.data })
		: null;
	if (!exported) error(404, 'Not found');
	return new Response(`${JSON.stringify(exported, null, '\t')}\n`, {
		headers: {
			'content-type': 'application/json; charset=utf-8',
			'content-disposition': `attachment; filename="protocol-version-${exported.version}.json"`,
			'cache-control': 'private, no-store'
		}
	});
};

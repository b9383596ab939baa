import { error } from '@sveltejs/kit';
import { z } from 'zod';
import { writeRegistryText } from '$lib/protocol/reporting/registry-text';
import { requirePermission } from '$lib/server/access/require-permission';
import { loadDocument } from '$lib/server/protocols/load-document';
import type { RequestHandler } from './$types';

/** Registration fields of a frozen version as plain text. */
export const GET: RequestHandler = async ({ locals, params, url }) => {
	const grant = await requirePermission(locals, 'protocol:read', params);
	const number = z.coerce.number().int().positive().safeParse(url.searchParams.get('version'));
	const facts = number.success
		? await loadDocument(locals.db, locals.clock, grant, { number: number.data })
		: null;
	if (!facts) error(404, 'Not found');
	return new Response(writeRegistryText(facts).text, {
		headers: {
			'content-type': 'text/plain; charset=utf-8',
			'content-disposition': `attachment; filename="registry-version-${facts.number}.txt"`,
			'cache-control': 'private, no-store'
		}
	});
};

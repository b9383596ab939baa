import { error } from '@sveltejs/kit';
import { z } from 'zod';
import { listPackParts } from '$lib/protocol/reporting/ethics-pack';
import { requirePermission } from '$lib/server/access/require-permission';
import { loadDocument } from '$lib/server/protocols/load-document';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params, url }) => {
	const grant = await requirePermission(locals, 'protocol:read', params);
	const wanted = url.searchParams.get('version') ?? undefined;
	const number = z.coerce.number().int().positive().optional().safeParse(wanted);
	if (!number.success) error(404, 'Not found');
	const facts = await loadDocument(locals.db, locals.clock, grant, { number: number.data });
	if (!facts) error(404, 'Not found');
	const { publicTitle, labName, frozenOn, hash } = facts;
	return {
		number: facts.number,
		publicTitle,
		labName,
		frozenOn,
		hash,
		parts: listPackParts(facts)
	};
};

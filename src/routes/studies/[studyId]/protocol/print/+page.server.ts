import { error } from '@sveltejs/kit';
import { z } from 'zod';
import { printDocument } from '$lib/protocol/print-document';
import { requirePermission } from '$lib/server/access/require-permission';
import { loadDocument } from '$lib/server/protocols/load-document';
import type { PageServerLoad } from './$types';

const wantedSchema = z.object({
	version: z.coerce.number().int().positive().optional(),
	paper: z.enum(['a4', 'letter']).catch('a4')
});

export const load: PageServerLoad = async ({ locals, params, url }) => {
	const grant = await requirePermission(locals, 'protocol:read', params);
	const wanted = wantedSchema.safeParse({
		version: url.searchParams.get('version') ?? undefined,
		paper: url.searchParams.get('paper')
	});
	if (!wanted.success) error(404, 'Not found');
	const { version, paper } = wanted.data;
	const facts = await loadDocument(locals.db, locals.clock, grant, { number: version });
	if (!facts) error(404, 'Not found');
	return { document: printDocument(facts), withRule: facts.withRule, paper };
};

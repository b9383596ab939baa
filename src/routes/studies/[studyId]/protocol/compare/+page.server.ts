import { error } from '@sveltejs/kit';
import { z } from 'zod';
import { requirePermission } from '$lib/server/access/require-permission';
import { compareVersions } from '$lib/server/protocols/compare-versions';
import { loadStudyZone } from '$lib/server/studies/load-study-zone';
import { formatWithZone } from '$lib/time/format-instant';
import type { PageServerLoad } from './$types';

const numbersSchema = z.object({
	from: z.coerce.number().int().positive().optional(),
	to: z.coerce.number().int().positive().optional()
});

export const load: PageServerLoad = async ({ locals, params, url }) => {
	const grant = await requirePermission(locals, 'protocol:read', params);
	const wanted = numbersSchema.safeParse({
		from: url.searchParams.get('from') ?? undefined,
		to: url.searchParams.get('to') ?? undefined
	});
	if (!wanted.success) error(404, 'Not found');
	const compared = await compareVersions(locals.db, grant, wanted.data);
	const isAsked = url.searchParams.has('from') || url.searchParams.has('to');
	if (!compared && isAsked) error(404, 'Not found');
	const zone = await loadStudyZone(locals.db, grant.studyId);
	const tell = (ms: number) => formatWithZone(ms, zone);
	return {
		compared,
		fromText: compared ? tell(compared.from.frozenAtMs) : '',
		toText: compared ? tell(compared.to.frozenAtMs) : ''
	};
};

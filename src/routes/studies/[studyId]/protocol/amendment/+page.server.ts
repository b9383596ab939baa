import { error } from '@sveltejs/kit';
import { z } from 'zod';
import { describeTerms } from '$lib/protocol/amendment';
import { requirePermission } from '$lib/server/access/require-permission';
import { loadAmendmentPage } from '$lib/server/amendments/load-amendment-page';
import { loadStudyZone } from '$lib/server/studies/load-study-zone';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params, url }) => {
	const grant = await requirePermission(locals, 'protocol:read', params);
	const number = z.coerce.number().int().positive().safeParse(url.searchParams.get('version'));
	if (!number.success) error(404, 'Not found');
	const page = await loadAmendmentPage(locals.db, locals.clock, grant, number.data);
	if (!page) error(404, 'Not found');
	const zone = await loadStudyZone(locals.db, grant.studyId);
	return { ...page, zone, lines: describeTerms(page.terms) };
};

import { redirect } from '@sveltejs/kit';
import { requirePermission } from '$lib/server/access/require-permission';
import type { PageServerLoad } from './$types';

/** A study opens on what waits for the person today. */
export const load: PageServerLoad = async ({ locals, params }) => {
	const grant = await requirePermission(locals, 'study:read', params);
	redirect(303, `/studies/${grant.studyId}/today`);
};

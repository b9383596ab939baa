import { error } from '@sveltejs/kit';
import { setError, superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { z } from 'zod';
import { signOffSchema } from '$lib/power/sign-off';
import { whatIfSchema } from '$lib/power/what-if';
import { requirePermission } from '$lib/server/access/require-permission';
import { loadPower } from '$lib/server/power/load-power';
import { signOffVersion } from '$lib/server/power/sign-off-version';
import { loadProgress } from '$lib/server/studies/load-progress';
import { loadStudyZone } from '$lib/server/studies/load-study-zone';
import { formatWithZone } from '$lib/time/format-instant';
import type { Actions, PageServerLoad } from './$types';

const numberSchema = z.coerce.number().int().positive();

export const load: PageServerLoad = async ({ locals, params, url }) => {
	const grant = await requirePermission(locals, 'power:read', params);
	const { db, clock } = locals;
	const wanted = url.searchParams.get('version');
	const number = wanted === null ? undefined : numberSchema.safeParse(wanted).data;
	const loaded =
		wanted !== null && number === undefined ? null : await loadPower(db, grant, { number });
	if (wanted !== null && !loaded) error(404, 'Not found');
	const zone = await loadStudyZone(db, grant.studyId);
	const maySign = grant.roles.includes('statistician');
	const form =
		maySign && loaded ? await superValidate(zod4(signOffSchema), { id: 'sign-off' }) : null;
	return {
		power: loaded && {
			...loaded,
			verdicts: loaded.verdicts.map((said) => ({ ...said, at: formatWithZone(said.atMs, zone) }))
		},
		progress: await loadProgress(db, clock, grant),
		/** What the page was asked to try in place of the plan. */
		asked: whatIfSchema.safeParse(Object.fromEntries(url.searchParams)).data ?? {},
		signForm: form
	};
};

export const actions: Actions = {
	default: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'power:sign', params);
		const form = await superValidate(request, zod4(signOffSchema), { id: 'sign-off' });
		if (!form.valid) return { form };
		const said = await signOffVersion(locals.db, locals.clock, grant, form.data);
		if (said.ok) return { form, verdict: form.data.verdict, versionNumber: said.versionNumber };
		return setError(form, 'comment', 'This study has no version with that hash any more.');
	}
};

import { fail } from '@sveltejs/kit';
import { message, setError, superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { z } from 'zod';
import { pauseSchema } from '$lib/pauses/pause-input';
import { requirePermission } from '$lib/server/access/require-permission';
import { liftPause } from '$lib/server/pauses/lift-pause';
import { listOpenPauses, listUnconfirmedRigs } from '$lib/server/pauses/list-pauses';
import { pauseStudy } from '$lib/server/pauses/pause-study';
import { loadStudyZone } from '$lib/server/studies/load-study-zone';
import { formatTime, formatWithZone } from '$lib/time/format-instant';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => {
	const grant = await requirePermission(locals, 'study:pause', params);
	const { db, clock } = locals;
	const zone = await loadStudyZone(db, grant.studyId);
	const pauses = await listOpenPauses(db, grant);
	const rigs = pauses.length > 0 ? await listUnconfirmedRigs(db, clock, grant) : [];
	return {
		pauses: pauses.map((pause) => ({
			...pause,
			pausedAt: formatWithZone(pause.pausedAtMs, zone)
		})),
		rigs: rigs.map(({ name, expiresAtMs }) => ({ name, until: formatTime(expiresAtMs, zone) })),
		form: await superValidate(zod4(pauseSchema), { errors: false })
	};
};

export const actions: Actions = {
	pause: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'study:pause', params);
		const form = await superValidate(request, zod4(pauseSchema));
		if (!form.valid) return { form };
		const paused = await pauseStudy(locals.db, locals.clock, grant, form.data);
		if (paused.ok) return message(form, 'The study is paused.');
		return setError(form, 'reason', 'You have paused this study already.');
	},
	lift: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'pause:lift', params);
		const pauseId = z.uuid().safeParse((await request.formData()).get('pauseId'));
		const lifted = pauseId.success
			? await liftPause(locals.db, locals.clock, grant, { pauseId: pauseId.data })
			: { ok: false as const, reason: 'no-such-pause' as const };
		if (lifted.ok) return { lifted: lifted.state };
		return fail(409, { refused: lifted.reason });
	}
};

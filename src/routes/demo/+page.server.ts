import { fail, redirect } from '@sveltejs/kit';
import { z } from 'zod';
import { setError, superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import type { Actions, PageServerLoad } from './$types';
import { setSessionCookie } from '$lib/server/auth/session-cookie';
import { endSession, startSession } from '$lib/server/auth/sessions';
import { safePath } from '$lib/server/auth/safe-path';
import { config } from '$lib/server/config';
import { isDemoPerson, listDemoPeople } from '$lib/server/demo/list-demo-people';
import { loadDemoZone, moveClock } from '$lib/server/demo/move-clock';
import { requireDemo } from '$lib/server/demo/require-demo';
import { clockSchema } from '$lib/members/clock-schema';
import { formatWithZone } from '$lib/time/format-instant';
import { wallClock } from '$lib/time/wall-clock';

const enterSchema = z.object({ personId: z.uuid(), to: z.string().max(2000).default('') });

export const load: PageServerLoad = async ({ locals, url }) => {
	const grant = requireDemo(locals);
	const zone = await loadDemoZone(locals.db);
	const nowMs = locals.clock.now();
	return {
		kind: grant.kind,
		ownId: locals.person?.id ?? null,
		people: await listDemoPeople(locals.db, grant),
		to: safePath(url.searchParams.get('to')),
		clockText: formatWithZone(nowMs, zone),
		mailboxUrl: config().OVALRY_MAILBOX_URL ?? null,
		form: await superValidate({ local: wallClock(nowMs, zone).slice(0, 16) }, zod4(clockSchema), {
			errors: false
		})
	};
};

export const actions: Actions = {
	enter: async ({ locals, request, cookies }) => {
		const grant = requireDemo(locals);
		const wanted = enterSchema.safeParse(Object.fromEntries(await request.formData()));
		if (!wanted.success || !(await isDemoPerson(locals.db, grant, wanted.data.personId))) {
			return fail(400, { refused: 'They are not in the list any more.' });
		}
		if (locals.sessionToken) await endSession(locals.db, locals.sessionToken);
		const userAgent = request.headers.get('user-agent') ?? '';
		const { personId, to } = wanted.data;
		const session = await startSession(locals.db, { personId, userAgent });
		setSessionCookie(cookies, config().ORIGIN, session);
		redirect(303, safePath(to));
	},
	hour: async ({ locals }) => {
		const grant = requireDemo(locals);
		await moveClock(locals.db, locals.clock, grant, { by: 'hour' });
		redirect(303, '/demo#clock');
	},
	morning: async ({ locals }) => {
		const grant = requireDemo(locals);
		await moveClock(locals.db, locals.clock, grant, { by: 'morning' });
		redirect(303, '/demo#clock');
	},
	instant: async ({ locals, request }) => {
		const grant = requireDemo(locals);
		const form = await superValidate(request, zod4(clockSchema));
		if (!form.valid) return fail(400, { form });
		const move = { by: 'instant', local: form.data.local } as const;
		const answer = await moveClock(locals.db, locals.clock, grant, move);
		if (answer.ok) redirect(303, '/demo#clock');
		return setError(form, 'local', clockFaults[answer.reason]);
	}
};

const clockFaults = {
	'not-forward': 'The demo clock only goes forward. Write a time that is still ahead.',
	'too-far': 'At most 400 days at a time.',
	'clock-gap': 'Clocks jump over this time on that day. Write an hour earlier or later.'
};

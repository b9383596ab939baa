import { error, fail, redirect } from '@sveltejs/kit';
import { message, superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import type { Actions, PageServerLoad } from './$types';
import { setSessionCookie } from '$lib/server/auth/session-cookie';
import { startSession } from '$lib/server/auth/sessions';
import { config } from '$lib/server/config';
import { mayTry } from '$lib/server/http/limit-rate';
import { checkSetupLink, setUpLab } from '$lib/server/setup/set-up-lab';
import { setupSchema } from '$lib/labs/lab-schemas';
import { zoneNames } from '$lib/time/is-valid-zone';

export const load: PageServerLoad = async ({ locals, params, getClientAddress }) => {
	await limit(getClientAddress());
	const state = await checkSetupLink(locals.db, params.token);
	if (state === 'unknown') error(404, 'Not found');
	return {
		state,
		zones: state === 'open' ? zoneNames() : [],
		form: await superValidate(zod4(setupSchema))
	};
};

export const actions: Actions = {
	default: async ({ locals, params, request, cookies, getClientAddress }) => {
		await limit(getClientAddress());
		const form = await superValidate(request, zod4(setupSchema));
		if (!form.valid) return fail(400, { form });
		const { db, clock } = locals;
		const answer = await setUpLab(db, clock, { token: params.token, facts: form.data });
		if (!answer.ok) {
			if (answer.reason === 'unknown') error(404, 'Not found');
			return message(form, answer.reason, { status: 400 });
		}
		const userAgent = request.headers.get('user-agent') ?? '';
		const session = await startSession(db, { personId: answer.personId, userAgent });
		setSessionCookie(cookies, config().ORIGIN, session);
		redirect(303, `/lab/${answer.labId}`);
	}
};

async function limit(address: string): Promise<void> {
	if (!(await mayTry('token', address))) error(429, 'Too many tries');
}

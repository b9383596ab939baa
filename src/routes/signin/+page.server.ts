import { fail, redirect } from '@sveltejs/kit';
import { setError, superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import type { Actions, PageServerLoad } from './$types';
import { startSignIn } from '$lib/server/auth/auth';
import { safePath } from '$lib/server/auth/safe-path';
import { config } from '$lib/server/config';
import { mayTry } from '$lib/server/http/limit-rate';
import { signInSchema } from '$lib/members/sign-in-schema';
import { explainSignInFault } from '$lib/members/sign-in-faults';

export const load: PageServerLoad = async ({ locals, url }) => {
	const to = safePath(url.searchParams.get('to'));
	if (locals.person) redirect(303, to);
	const { OIDC_ISSUER, OIDC_LABEL } = config();
	return {
		form: await superValidate({ to }, zod4(signInSchema), { errors: false }),
		fault: explainSignInFault(url.searchParams.get('error')),
		wantsPage: to !== '/home',
		university: OIDC_ISSUER ? OIDC_LABEL : null
	};
};

export const actions: Actions = {
	link: async (event) => {
		const form = await superValidate(event.request, zod4(signInSchema));
		if (!form.valid) return fail(400, { form });
		if (!(await mayTry('link', form.data.email))) {
			return setError(
				form,
				'email',
				'Five links were asked for in ten minutes. Look into the mailbox and the spam folder, or wait ten minutes.',
				{ status: 429 }
			);
		}
		const { email, to } = form.data;
		await startSignIn(event, { provider: 'nodemailer', email, to: safePath(to) });
		redirect(303, '/signin/sent');
	},
	university: async (event) => {
		const to = safePath((await event.request.formData()).get('to')?.toString());
		redirect(303, await startSignIn(event, { provider: 'university', to }));
	}
};

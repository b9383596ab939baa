import { fail, redirect } from '@sveltejs/kit';
import { z } from 'zod';
import { message, superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import type { Actions, PageServerLoad } from './$types';
import { requirePermission } from '$lib/server/access/require-permission';
import { clearSessionCookie } from '$lib/server/auth/session-cookie';
import { endOwnSession, endSessionsOf, listOwnSessions } from '$lib/server/auth/sessions';
import { config } from '$lib/server/config';
import { changeOwnName, loadAccount } from '$lib/server/members/own-account';
import { nameSchema } from '$lib/members/name-schema';

const sessionSchema = z.object({ id: z.string().regex(/^[0-9a-f]{64}$/) });

export const load: PageServerLoad = async ({ locals }) => {
	const grant = await requirePermission(locals, 'account:manage');
	const account = await loadAccount(locals.db, grant);
	return {
		form: await superValidate({ name: account.name }, zod4(nameSchema), { errors: false }),
		account,
		sessions: await listOwnSessions(locals.db, grant, locals.sessionToken)
	};
};

export const actions: Actions = {
	name: async ({ locals, request }) => {
		const grant = await requirePermission(locals, 'account:manage');
		const form = await superValidate(request, zod4(nameSchema));
		if (!form.valid) return fail(400, { form });
		await changeOwnName(locals.db, grant, form.data.name);
		return message(form, 'Your name is changed.');
	},
	end: async ({ locals, request }) => {
		const grant = await requirePermission(locals, 'account:manage');
		const wanted = sessionSchema.safeParse(Object.fromEntries(await request.formData()));
		if (!wanted.success) return fail(400, { notice: 'That session is not in the list any more.' });
		await endOwnSession(locals.db, grant, wanted.data.id);
		return { notice: 'That session is ended.' };
	},
	everywhere: async ({ locals, cookies }) => {
		const grant = await requirePermission(locals, 'account:manage');
		await endSessionsOf(locals.db, grant.personId);
		clearSessionCookie(cookies, config().ORIGIN);
		redirect(303, '/signin');
	}
};

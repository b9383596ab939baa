import { redirect } from '@sveltejs/kit';
import type { RequestHandler } from './$types';
import { clearSessionCookie } from '$lib/server/auth/session-cookie';
import { endSession } from '$lib/server/auth/sessions';
import { config } from '$lib/server/config';

/** Ends the session of this browser. */
export const POST: RequestHandler = async ({ locals, cookies }) => {
	if (locals.sessionToken) await endSession(locals.db, locals.sessionToken);
	clearSessionCookie(cookies, config().ORIGIN);
	redirect(303, '/');
};

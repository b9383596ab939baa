import { Auth, raw, skipCSRFCheck } from '@auth/core';
import { SvelteKitAuth } from '@auth/sveltekit';
import type { Handle, RequestEvent } from '@sveltejs/kit';
import { config } from '$lib/server/config';
import { createAuthConfig } from './auth-config';
import { sessionCookieName } from './session-cookie';

const callbackPath = '/auth/callback/';

const { handle: answerCallback } = SvelteKitAuth(async (event) => configFor(event));

/** Lets Auth.js answer where a link or another institution's sign-on comes back, and nowhere else. */
export const handle: Handle = async (input) => {
	const { event, resolve } = input;
	if (!event.url.pathname.startsWith(callbackPath)) return resolve(event);
	return keepDeepLink(await answerCallback(input), event.url);
};

/** A refused sign-in goes to the sign-in page; what the link was for stays in its address. */
function keepDeepLink(response: Response, asked: URL): Response {
	const location = response.headers.get('location');
	const wanted = asked.searchParams.get('callbackUrl');
	if (!location || !wanted || !URL.canParse(wanted, asked.origin)) return response;
	const target = new URL(location, asked.origin);
	const goal = new URL(wanted, asked.origin);
	if (target.pathname !== '/signin' || goal.origin !== asked.origin) return response;
	target.searchParams.set('to', goal.pathname + goal.search);
	const headers = new Headers(response.headers);
	headers.set('location', target.pathname + target.search);
	return new Response(null, { status: response.status, headers });
}

type Start = { provider: 'nodemailer' | 'university'; email?: string; to: string };

/**
 * Begins a sign-in: mails a link, or gives the address of the university's sign-on to go to. The
 * address of this site comes from the settings, never from what the request says of itself.
 */
export async function startSignIn(event: RequestEvent, { provider, email, to }: Start) {
	const { ORIGIN } = config();
	const request = new Request(new URL(`/auth/signin/${provider}`, ORIGIN), {
		method: 'POST',
		headers: {
			cookie: event.request.headers.get('cookie') ?? '',
			'content-type': 'application/x-www-form-urlencoded'
		},
		body: new URLSearchParams({
			...(email ? { email } : {}),
			callbackUrl: new URL(to, ORIGIN).toString()
		})
	});
	const answer = await Auth(request, { ...configFor(event), raw, skipCSRFCheck });
	for (const { name, value, options } of answer.cookies ?? []) {
		event.cookies.set(name, value, { path: '/', ...options });
	}
	return answer.redirect ?? '/signin?error=Configuration';
}

function configFor(event: RequestEvent) {
	const { db, clock } = event.locals;
	return createAuthConfig({
		db,
		clock,
		settings: config(),
		userAgent: event.request.headers.get('user-agent') ?? '',
		earlierToken: event.cookies.get(sessionCookieName(config().ORIGIN)) ?? null
	});
}

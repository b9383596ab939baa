import { redirect } from '@sveltejs/kit';
import type { PageServerLoad } from './$types';
import { config } from '$lib/server/config';
import { loadFrontPage } from '$lib/server/front-page/load-front-page';

/** For anybody. Somebody who is signed in goes on to what waits for them. */
export const load: PageServerLoad = ({ locals }) => {
	if (locals.person) redirect(303, '/home');
	const { OIDC_ISSUER, OIDC_LABEL } = config();
	return {
		...loadFrontPage(),
		university: OIDC_ISSUER ? OIDC_LABEL : null,
		hasDemo: locals.instanceKind === 'demo'
	};
};

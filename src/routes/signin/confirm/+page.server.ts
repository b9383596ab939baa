import type { PageServerLoad } from './$types';
import { confirmSchema } from '$lib/members/confirm-schema';

/**
 * The page that a mailed link opens. It reads nothing and uses nothing up: programs that look at
 * links in mails get no further than the button.
 */
export const load: PageServerLoad = async ({ url }) => {
	const link = confirmSchema.safeParse(Object.fromEntries(url.searchParams));
	return { link: link.success ? link.data : null };
};

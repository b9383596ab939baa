import { redirect } from '@sveltejs/kit';
import { requireAnswerLink } from '$lib/server/access/require-answer-link';
import { askToStop } from '$lib/server/answers/ask-to-stop';
import { loadAnswerPage } from '$lib/server/answers/load-answer-page';
import { runtimeMail } from '$lib/server/runtime';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const link = await requireAnswerLink(event);
	const { db, clock } = event.locals;
	const visit = await loadAnswerPage(db, clock, runtimeMail(), link);
	const back = `/visit/${event.params.token}`;
	if (visit.state === 'stopped' || visit.isStopping) redirect(303, back);
	return { lab: visit.lab, publicTitle: visit.publicTitle, visitorLab: visit.lab, back };
};

export const actions: Actions = {
	default: async (event) => {
		const link = await requireAnswerLink(event);
		await askToStop(event.locals.db, event.locals.clock, runtimeMail(), link);
		redirect(303, `/visit/${event.params.token}`);
	}
};

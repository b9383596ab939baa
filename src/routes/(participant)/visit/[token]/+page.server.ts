import { fail } from '@sveltejs/kit';
import { message, superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { answerSchema, type AnswerInput } from '$lib/answers/answer-schema';
import { requireAnswerLink } from '$lib/server/access/require-answer-link';
import { answerVisit } from '$lib/server/answers/answer-visit';
import { loadAnswerPage } from '$lib/server/answers/load-answer-page';
import { runtimeMail } from '$lib/server/runtime';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const link = await requireAnswerLink(event);
	const { db, clock } = event.locals;
	const visit = await loadAnswerPage(db, clock, runtimeMail(), link);
	const { answer, note } = visit;
	const given: Partial<AnswerInput> = answer === 'none' ? {} : { answer, note };
	// Nothing is chosen beforehand: an answer is the participant's own.
	const form = await superValidate({ answer: '' as never, ...given }, zod4(answerSchema), {
		errors: false
	});
	return { visit, form, visitorLab: { name: visit.lab.name }, token: event.params.token };
};

export const actions: Actions = {
	default: async (event) => {
		const link = await requireAnswerLink(event);
		const form = await superValidate(event.request, zod4(answerSchema));
		if (!form.valid) return fail(400, { form });
		const { db, clock } = event.locals;
		const outcome = await answerVisit(db, clock, runtimeMail(), { link, ...form.data });
		if (!outcome.ok) return message(form, { refused: outcome.reason }, { status: 409 });
		return message(form, { refused: null });
	}
};

import { error, fail } from '@sveltejs/kit';
import { z } from 'zod';
import { requirePermission } from '$lib/server/access/require-permission';
import { config } from '$lib/server/config';
import { mailSettingOf } from '$lib/server/invitations/mail-setting';
import { loadPersonCard } from '$lib/server/people/load-person-card';
import { recordConsent } from '$lib/server/people/record-consent';
import { withdrawPerson } from '$lib/server/people/withdraw-person';
import { runtimeKeys } from '$lib/server/runtime';
import { findMissingGates } from '$lib/server/studies/load-gates';
import { localDateOf } from '$lib/time/wall-clock';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => {
	const grant = await requirePermission(locals, 'participant:list', params);
	const card = await loadPersonCard(locals.db, locals.clock, grant, params.participantId);
	if (!card) error(404, 'Not found');
	return {
		studyId: grant.studyId,
		card,
		gates: await findMissingGates(locals.db, locals.clock, grant.studyId),
		today: localDateOf(locals.clock.now(), card.labZone)
	};
};

const consentSchema = z.object({
	textVersion: z.string().trim().min(1, 'Name the version of the text').max(40),
	signedOn: z.iso.date('Give the day as a date')
});

const consentRefusals = {
	'in-the-future': 'The day of the signature is still to come.',
	withdrawn: 'This person has withdrawn; nothing can be recorded for them.',
	'not-found': 'This person is not in this study.'
};

export const actions: Actions = {
	consent: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'consent:record', params);
		const form = consentSchema.safeParse(Object.fromEntries(await request.formData()));
		if (!form.success) return fail(422, { refused: form.error.issues[0]?.message ?? '' });
		const outcome = await recordConsent(locals.db, locals.clock, grant, {
			participantIds: [params.participantId],
			...form.data
		});
		if (!outcome.ok) return fail(409, { refused: consentRefusals[outcome.reason] });
		return { done: `Consent ${form.data.textVersion} is recorded.` };
	},
	withdraw: async ({ locals, params }) => {
		const grant = await requirePermission(locals, 'participant:withdraw', params);
		const { participantId } = params;
		const mail = mailSettingOf(config(), runtimeKeys());
		const outcome = await withdrawPerson(locals.db, locals.clock, grant, { participantId, mail });
		if (!outcome.ok) return fail(409, { refused: 'This person has withdrawn already.' });
		const visits = outcome.cancelledCount === 1 ? '1 visit' : `${outcome.cancelledCount} visits`;
		return { done: `Withdrawn. ${visits} cancelled, one mail confirms it. Earlier data are kept.` };
	}
};

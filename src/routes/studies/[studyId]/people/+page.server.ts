import { fail } from '@sveltejs/kit';
import { z } from 'zod';
import { peopleViews } from '$lib/people/people-list';
import { requirePermission } from '$lib/server/access/require-permission';
import { bookEarliest } from '$lib/server/bookings/book-earliest';
import { config } from '$lib/server/config';
import { mailSettingOf } from '$lib/server/invitations/mail-setting';
import { loadPeopleList } from '$lib/server/people/load-people-list';
import { recordConsent } from '$lib/server/people/record-consent';
import { runtimeKeys } from '$lib/server/runtime';
import { findMissingGates, loadRunningVersion } from '$lib/server/studies/load-gates';
import { localDateOf } from '$lib/time/wall-clock';
import type { Actions, PageServerLoad } from './$types';

const viewSchema = z.enum(peopleViews).catch('coming');

export const load: PageServerLoad = async ({ locals, params, url }) => {
	const grant = await requirePermission(locals, 'participant:list', params);
	const { db, clock } = locals;
	const list = await loadPeopleList(db, clock, grant);
	const version = await loadRunningVersion(db, clock, grant.studyId);
	return {
		studyId: grant.studyId,
		list,
		view: viewSchema.parse(
			url.searchParams.get('view') ?? (list.rows.length > 30 ? 'coming' : 'all')
		),
		find: url.searchParams.get('find') ?? '',
		gates: await findMissingGates(db, clock, grant.studyId),
		version: version && {
			number: version.number,
			consentTextVersion: version.content.consentTextVersion
		},
		today: localDateOf(clock.now(), list.zone)
	};
};

const chosenSchema = z.array(z.uuid()).min(1).max(500);
const consentSchema = z.object({
	textVersion: z.string().trim().min(1).max(40),
	signedOn: z.iso.date()
});

const consentRefusals = {
	'in-the-future': 'The day of the signature is still to come.',
	withdrawn: 'has withdrawn; nothing can be recorded for them.',
	'not-found': 'Somebody chosen is not in this study. Load the page again.'
};

export const actions: Actions = {
	consent: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'consent:record', params);
		const form = await request.formData();
		const chosen = chosenSchema.safeParse(form.getAll('chosen'));
		const consent = consentSchema.safeParse(Object.fromEntries(form));
		if (!chosen.success) return fail(422, { refused: 'Choose at least one person first.' });
		if (!consent.success) return fail(422, { refused: 'Give the version and the day signed.' });
		const outcome = await recordConsent(locals.db, locals.clock, grant, {
			participantIds: chosen.data,
			...consent.data
		});
		if (outcome.ok) return { done: `Consent recorded for ${outcome.codes.join(', ')}.` };
		const who = outcome.code ? `${outcome.code} ` : '';
		return fail(409, { refused: `${who}${consentRefusals[outcome.reason]}` });
	},
	book: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'booking:change', params);
		const chosen = chosenSchema.safeParse((await request.formData()).getAll('chosen'));
		if (!chosen.success) return fail(422, { refused: 'Choose at least one person first.' });
		const mail = mailSettingOf(config(), runtimeKeys());
		const results = await bookEarliest(locals.db, locals.clock, grant, {
			participantIds: chosen.data,
			mail
		});
		return { booked: results };
	}
};

import { error, redirect } from '@sveltejs/kit';
import { setError, superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { describeAvailability } from '$lib/people/availability';
import { enrolmentSchema } from '$lib/people/enrolment-form';
import { requirePermission } from '$lib/server/access/require-permission';
import { config } from '$lib/server/config';
import { mailSettingOf } from '$lib/server/invitations/mail-setting';
import { changeDetails } from '$lib/server/people/change-details';
import { openContacts } from '$lib/server/people/load-contacts';
import { loadParticipant } from '$lib/server/people/load-participants';
import { runtimeKeys } from '$lib/server/runtime';
import { zoneNames } from '$lib/time/is-valid-zone';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => {
	const grant = await requirePermission(locals, 'participant:list', params);
	const { participantId } = params;
	const person = await loadParticipant(locals.db, grant, participantId);
	if (!person) error(404, 'Not found');
	const keys = runtimeKeys();
	const [contact] = await openContacts(locals.db, locals.clock, grant, { keys, participantId });
	const { zone, language } = person;
	const availability = describeAvailability(person.availability);
	const cells = { ...contact?.details, zone, language, availability };
	return {
		studyId: grant.studyId,
		participantId,
		code: person.code,
		isErased: !contact?.details,
		form: await superValidate(cells, zod4(enrolmentSchema), { errors: false }),
		zones: zoneNames()
	};
};

export const actions: Actions = {
	default: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'participant:enrol', params);
		const form = await superValidate(request, zod4(enrolmentSchema));
		const keys = runtimeKeys();
		const outcome = await changeDetails(locals.db, locals.clock, grant, {
			keys,
			mail: mailSettingOf(config(), keys),
			participantId: params.participantId,
			cells: form.data
		});
		if (!outcome.ok && outcome.reason === 'not-found') error(404, 'Not found');
		if (!outcome.ok && 'faults' in outcome) {
			for (const { column, message, suggestion } of outcome.faults) {
				setError(form, column, suggestion ? `${message}; ${suggestion}?` : message);
			}
			return { form };
		}
		redirect(303, `/studies/${grant.studyId}/people/${params.participantId}`);
	}
};

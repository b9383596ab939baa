import { error, fail, redirect } from '@sveltejs/kit';
import { chosenPlacesSchema } from '$lib/bookings/placement-schema';
import { requirePermission } from '$lib/server/access/require-permission';
import { recordAttendance, type Attendance } from '$lib/server/attendance/record-attendance';
import { cancelVisit } from '$lib/server/bookings/cancel-visit';
import { explainRefusal } from '$lib/server/bookings/explain-refusal';
import { loadVisitCard } from '$lib/server/bookings/load-visit-card';
import { savePlan } from '$lib/server/bookings/save-plan';
import { settleRequest } from '$lib/server/bookings/settle-request';
import { config } from '$lib/server/config';
import { mailSettingOf } from '$lib/server/invitations/mail-setting';
import { runtimeKeys } from '$lib/server/runtime';
import { findMissingGates } from '$lib/server/studies/load-gates';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => {
	const grant = await requirePermission(locals, 'booking:change', params);
	const { db, clock } = locals;
	const { participantId, bookingId } = params;
	const keys = runtimeKeys();
	const card = await loadVisitCard(db, clock, grant, { keys, participantId, bookingId });
	if (!card) error(404, 'Not found');
	const gates = await findMissingGates(db, clock, grant.studyId);
	return { studyId: grant.studyId, participantId, card, gates };
};

const plainRefusals = {
	'not-found': 'This visit is not in this study.',
	'not-booked': 'It is cancelled, missed or over already.',
	over: 'It has begun or is over; say whether they came instead.',
	'no-request': 'The request is settled already.',
	'not-yet': 'The visit has not begun.',
	cancelled: 'The visit was cancelled.'
};

function refuse(reason: keyof typeof plainRefusals) {
	const text = plainRefusals[reason];
	return fail(409, { refusal: { title: 'Not done', text, sentences: [text] } });
}

export const actions: Actions = {
	move: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'booking:change', params);
		const form = chosenPlacesSchema.safeParse(Object.fromEntries(await request.formData()));
		if (!form.success) {
			const text = 'Choose one of the ways first.';
			return fail(422, { refusal: { title: 'Nothing chosen', text, sentences: [text] } });
		}
		const saved = await savePlan(locals.db, locals.clock, grant, {
			participantId: params.participantId,
			...form.data,
			mail: mailSettingOf(config(), runtimeKeys())
		});
		if (!saved.ok) return fail(409, { refusal: explainRefusal(saved) });
		redirect(303, `/studies/${grant.studyId}/people/${params.participantId}`);
	},
	cancel: async ({ locals, params }) => {
		const grant = await requirePermission(locals, 'booking:change', params);
		const mail = mailSettingOf(config(), runtimeKeys());
		const { bookingId } = params;
		const outcome = await cancelVisit(locals.db, locals.clock, grant, { bookingId, mail });
		if (!outcome.ok) return refuse(outcome.reason);
		redirect(303, `/studies/${grant.studyId}/people/${params.participantId}`);
	},
	keep: async ({ locals, params }) => {
		const grant = await requirePermission(locals, 'booking:change', params);
		const { bookingId } = params;
		const outcome = await settleRequest(locals.db, locals.clock, grant, { bookingId });
		if (!outcome.ok) return refuse(outcome.reason);
		return { done: 'The visit stays where it is; the request is settled.' };
	},
	attendance: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'attendance:record', params);
		const given = (await request.formData()).get('outcome');
		const outcome: Attendance = given === 'attended' ? 'attended' : 'no-show';
		const { bookingId } = params;
		const result = await recordAttendance(locals.db, locals.clock, grant, { bookingId, outcome });
		if (result.ok) return { done: outcome === 'attended' ? 'They came.' : 'They did not come.' };
		if (result.reason !== 'taken') return refuse(result.reason);
		const { sentence } = result.clash;
		return fail(409, { refusal: { title: 'Not done', text: sentence, sentences: [sentence] } });
	}
};

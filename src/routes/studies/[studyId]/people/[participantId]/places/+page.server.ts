import { error, fail, redirect } from '@sveltejs/kit';
import { chosenPlacesSchema } from '$lib/bookings/placement-schema';
import { requirePermission } from '$lib/server/access/require-permission';
import { explainRefusal } from '$lib/server/bookings/explain-refusal';
import { findHelps, proposeChains } from '$lib/server/bookings/propose-chains';
import { savePlan } from '$lib/server/bookings/save-plan';
import { tellChain, tellObstacle } from '$lib/server/bookings/tell-proposals';
import { config } from '$lib/server/config';
import { mailSettingOf } from '$lib/server/invitations/mail-setting';
import { runtimeKeys } from '$lib/server/runtime';
import { findMissingGates } from '$lib/server/studies/load-gates';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => {
	const grant = await requirePermission(locals, 'booking:change', params);
	const { db, clock } = locals;
	const { participantId } = params;
	const found = await proposeChains(db, clock, grant, { participantId });
	if (!found.ok && found.reason === 'not-found') error(404, 'Not found');
	if (!found.ok && found.reason === 'nothing-to-book') {
		redirect(303, `/studies/${grant.studyId}/people/${participantId}`);
	}
	if (!('plan' in found)) error(404, 'Not found');
	const { plan } = found;
	return {
		studyId: grant.studyId,
		participantId,
		code: plan.participant.code,
		zone: plan.participant.zone,
		labZone: plan.problem.calendar.zone,
		nowMs: clock.now(),
		isAllocated: plan.participant.allocatedAtMs !== null,
		hasConsent: plan.participant.consentedAtMs !== null,
		planVersion: plan.planVersion,
		chains: found.ok ? found.chains.map((chain) => tellChain(plan, chain)) : [],
		obstacle: found.ok ? [] : tellObstacle(plan, { ...found, helps: findHelps(plan, clock.now()) }),
		gates: await findMissingGates(db, clock, grant.studyId)
	};
};

export const actions: Actions = {
	default: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'booking:change', params);
		const form = chosenPlacesSchema.safeParse(Object.fromEntries(await request.formData()));
		if (!form.success) {
			const text = 'Choose one of the chains first.';
			return fail(422, { refusal: { title: 'Nothing chosen', text, sentences: [text] } });
		}
		const saved = await savePlan(locals.db, locals.clock, grant, {
			participantId: params.participantId,
			...form.data,
			mail: mailSettingOf(config(), runtimeKeys())
		});
		if (!saved.ok) return fail(409, { refusal: explainRefusal(saved) });
		redirect(303, `/studies/${grant.studyId}/people/${params.participantId}`);
	}
};

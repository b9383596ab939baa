import { error, fail } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { settleInputSchema } from '$lib/decisions/settle-input';
import { requirePermission } from '$lib/server/access/require-permission';
import { loadDecisionCard } from '$lib/server/decisions/load-decision-card';
import { replayStoredDecision } from '$lib/server/decisions/replay-stored-decision';
import { settleDecision } from '$lib/server/decisions/settle-decision';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => {
	const grant = await requirePermission(locals, 'decision:read', params);
	const card = await loadDecisionCard(locals.db, locals.clock, grant, params.decisionId);
	if (!card) error(404, 'Not found');
	return { card, studyId: grant.studyId, maySettle: grant.roles.includes('approver') };
};

const refusals = {
	'not-held': 'It is settled already. Reload the page to see how.',
	'too-late': 'Its ready hour has come: the fallback runs.',
	'nothing-to-use': 'This decision has no block of its own. Run plain practice.',
	'out-of-bounds': 'That change is not possible.'
};

export const actions: Actions = {
	settle: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'decision:settle', params);
		const form = await superValidate(request, zod4(settleInputSchema));
		if (!form.valid) return fail(422, { errors: form.errors, given: form.data });
		const decisionId = params.decisionId;
		const settled = await settleDecision(locals.db, locals.clock, grant, {
			decisionId,
			input: form.data
		});
		if (settled.ok) return { settled: true };
		return fail(409, { refused: settled.detail ?? refusals[settled.reason], given: form.data });
	},
	replay: async ({ locals, params }) => {
		const grant = await requirePermission(locals, 'decision:replay', params);
		const card = await loadDecisionCard(locals.db, locals.clock, grant as never, params.decisionId);
		if (!card) error(404, 'Not found');
		return { replay: await replayStoredDecision(locals.db, card.id) };
	}
};

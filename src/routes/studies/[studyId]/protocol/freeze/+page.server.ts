import { fail, redirect } from '@sveltejs/kit';
import { message, setError, superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { roleInSentence } from '$lib/members/role-names';
import { freezeSchema, type FreezeForm } from '$lib/protocol/amendment';
import { requirePermission } from '$lib/server/access/require-permission';
import { freezeVersion, type FreezeRefusal } from '$lib/server/protocols/freeze-version';
import { loadFreezing } from '$lib/server/protocols/load-freezing';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => {
	const grant = await requirePermission(locals, 'protocol:freeze', params);
	const freezing = await loadFreezing(locals.db, locals.clock, grant);
	if (!freezing) redirect(303, `/studies/${grant.studyId}/protocol`);
	const { number, revision, running, compared } = freezing;
	const defaults: Partial<FreezeForm> = {
		number,
		revision,
		reason: compared ? '' : 'First version.',
		effectiveOn: running?.today ?? '',
		follows: running && running.chainChanges.length > 0 ? 'new-people' : 'in-flight',
		renewal: running?.isNewConsentText ? 'visits-to-come' : 'nobody'
	};
	const form = await superValidate(defaults, zod4(freezeSchema), { errors: false });
	return { freezing, form };
};

export const actions: Actions = {
	default: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'protocol:freeze', params);
		const form = await superValidate(request, zod4(freezeSchema));
		if (!form.valid) return fail(400, { form });
		const { number, revision, reason, ...terms } = form.data;
		const amendment = terms.effectiveOn === '' ? undefined : terms;
		const input = { number, revision, reason, amendment };
		const frozen = await freezeVersion(locals.db, locals.clock, grant, input);
		if (frozen.ok) redirect(303, `/studies/${grant.studyId}/protocol?frozen=${frozen.number}`);
		if (frozen.reason === 'in-the-past') {
			return setError(form, 'effectiveOn', 'This day is over. Choose today or a later day.');
		}
		if (frozen.reason === 'same-consent-text') {
			const text =
				'There is no new text to consent to: the version names the consent text that people signed. Give the text a new number in the draft.';
			return setError(form, 'renewal', text);
		}
		return message(form, tellRefusal(frozen), { status: 409 });
	}
};

function tellRefusal(refusal: FreezeRefusal): string {
	switch (refusal.reason) {
		case 'no-draft':
			return 'This draft is frozen already, or was replaced by another.';
		case 'stale':
			return 'The draft changed since this page was loaded. Load the page again, read what changed, then freeze it.';
		case 'unchanged':
			return 'Nothing differs from the version that is frozen already.';
		case 'nothing-runs':
			return 'No version runs any more, so nothing is amended. Load the page again.';
		case 'faults':
			return `The draft has ${refusal.faults.length === 1 ? 'a fault' : `${refusal.faults.length} faults`}: ${refusal.faults.map(({ place, text }) => `${place}: ${text}`).join(' ')}`;
		case 'team': {
			const who = refusal.clashes.map(
				({ name, role, other }) =>
					`${name} holds or held ${roleInSentence(other)} and ${roleInSentence(role)}`
			);
			return `The exceptions that this draft declares do not fit the team: ${who.join('; ')}. These two roles must never meet in one person of this study. Declare other exceptions in the draft, or let somebody else take part.`;
		}
		default:
			return 'This version cannot be frozen as it stands.';
	}
}

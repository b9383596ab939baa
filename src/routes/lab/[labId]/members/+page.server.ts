import { fail } from '@sveltejs/kit';
import { message, setError, superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import type { Actions, PageServerLoad } from './$types';
import { requirePermission } from '$lib/server/access/require-permission';
import { config } from '$lib/server/config';
import { logger } from '$lib/server/http/logger';
import {
	inviteMember,
	invitationDays,
	resendInvitation,
	type InvitingPlace
} from '$lib/server/members/invite-member';
import { listMembers } from '$lib/server/members/list-members';
import { removeMember, setSteward } from '$lib/server/members/remove-member';
import { loadLab } from '$lib/server/labs/load-lab';
import { inviteSchema, memberSchema } from '$lib/members/invite-schema';

export const load: PageServerLoad = async ({ locals, params }) => {
	const grant = await requirePermission(locals, 'lab:manage', params);
	return {
		ownId: grant.personId,
		zone: (await loadLab(locals.db, grant)).zone,
		members: await listMembers(locals.db, grant),
		invitationDays,
		form: await superValidate(zod4(inviteSchema))
	};
};

const refusals = {
	'no-such-member': 'They are no member any more. The list below is up to date.',
	'last-steward': 'A lab always has a steward. Make somebody else steward first.',
	'mail-failed':
		'The mail server did not take the mail. Nothing was sent; try again in a few minutes.'
};

export const actions: Actions = {
	invite: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'lab:manage', params);
		const form = await superValidate(request, zod4(inviteSchema));
		if (!form.valid) return fail(400, { form });
		const place = invitingPlace(locals);
		const answer = await inviteMember(place, grant, form.data);
		if (!answer.ok) {
			return setError(form, 'email', 'This address belongs to a member already, see the list.');
		}
		const { name, email } = form.data;
		return message(form, {
			tone: answer.wasMailed ? ('spruce' as const) : ('amber' as const),
			text: answer.wasMailed
				? `${name} is a member; the invitation is on its way to ${email}.`
				: `${name} is a member, but the mail server did not take the invitation. Send it again from the list.`
		});
	},
	resend: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'lab:manage', params);
		const row = memberSchema.safeParse(Object.fromEntries(await request.formData()));
		if (!row.success) return fail(400, { refused: refusals['no-such-member'] });
		const place = invitingPlace(locals);
		const answer = await resendInvitation(place, grant, row.data.personId);
		if (!answer.ok) return fail(400, { refused: refusals[answer.reason] });
		return { notice: 'The invitation is on its way once more. The earlier link works too.' };
	},
	remove: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'lab:manage', params);
		const row = memberSchema.safeParse(Object.fromEntries(await request.formData()));
		if (!row.success) return fail(400, { refused: refusals['no-such-member'] });
		const { db, clock } = locals;
		const answer = await removeMember(db, clock, grant, row.data.personId);
		if (!answer.ok) return fail(400, { refused: refusals[answer.reason] });
		return { notice: 'They have left: signed out everywhere, and without any role here.' };
	},
	steward: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'lab:manage', params);
		const row = memberSchema.safeParse(Object.fromEntries(await request.formData()));
		if (!row.success) return fail(400, { refused: refusals['no-such-member'] });
		const { personId, isSteward } = row.data;
		const { db, clock } = locals;
		const answer = await setSteward(db, clock, grant, { personId, isSteward });
		if (!answer.ok) return fail(400, { refused: refusals[answer.reason] });
		return { notice: isSteward ? 'They are steward too.' : 'They are a plain member now.' };
	}
};

function invitingPlace({ db, clock }: App.Locals): InvitingPlace {
	return { db, clock, settings: config(), log: logger() };
}

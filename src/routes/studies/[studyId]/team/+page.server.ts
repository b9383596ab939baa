import { fail } from '@sveltejs/kit';
import { message, setError, superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import type { Actions, PageServerLoad } from './$types';
import { isAllowed } from '$lib/server/access/permissions';
import { requirePermission, type Grant } from '$lib/server/access/require-permission';
import { confirmRole, endRole, giveRole } from '$lib/server/members/give-role';
import { loadCandidates, loadTeam } from '$lib/server/members/load-team';
import { listMemberNames } from '$lib/server/members/list-members';
import { loadStudyPlace } from '$lib/server/members/load-study-place';
import { explainForbiddenPair } from '$lib/members/explain-forbidden-pair';
import { roleInSentence } from '$lib/members/role-names';
import { giveRoleSchema, roleField, roleRowSchema } from '$lib/members/role-schema';

export const load: PageServerLoad = async ({ locals, params }) => {
	const grant = await requirePermission(locals, 'team:read', params);
	const mayGive = isAllowed('role:give', { isMember: true, ...grant });
	return {
		ownId: grant.personId,
		place: await loadStudyPlace(locals.db, grant),
		team: await loadTeam(locals.db, grant),
		mayGive,
		candidates: mayGive ? await loadCandidates(locals.db, grant) : [],
		form: await superValidate(zod4(giveRoleSchema))
	};
};

export const actions: Actions = {
	give: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'role:give', params);
		const form = await superValidate(request, zod4(giveRoleSchema));
		if (!form.valid) return fail(400, { form });
		const { personId } = form.data;
		const role = roleField.parse(form.data.role);
		const name = await nameOf(locals, grant, personId);
		const answer = await giveRole(locals.db, locals.clock, grant, { personId, role });
		if (answer.ok) {
			const label = roleInSentence(role);
			return message(
				form,
				answer.waits
					? `${name} is to be ${label}. It counts once a second person has confirmed it.`
					: `${name} is ${label} now.`
			);
		}
		const words = {
			'no-such-member': 'They have left the lab. Choose another member.',
			'has-it': 'They have this role already.',
			'own-role':
				'Nobody gives this role to themself. Ask another steward to give it, or choose somebody else.',
			'forbidden-pair': 'partner' in answer ? explainForbiddenPair(role, answer.partner) : ''
		};
		const field = answer.reason === 'no-such-member' ? 'personId' : 'role';
		return setError(form, field, words[answer.reason]);
	},
	confirm: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'role:confirm', params);
		const row = roleRowSchema.safeParse(Object.fromEntries(await request.formData()));
		if (!row.success) return fail(400, { refused: refusals['not-waiting'] });
		const answer = await confirmRole(locals.db, locals.clock, grant, row.data.roleId);
		if (!answer.ok) return fail(400, { refused: refusals[answer.reason] });
		const name = await nameOf(locals, grant, answer.personId);
		return { notice: `${name} is ${roleInSentence(answer.role)} now.` };
	},
	end: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'role:give', params);
		const row = roleRowSchema.safeParse(Object.fromEntries(await request.formData()));
		if (!row.success) return fail(400, { refused: refusals['no-such-role'] });
		const answer = await endRole(locals.db, locals.clock, grant, row.data.roleId);
		if (!answer.ok) return fail(400, { refused: refusals[answer.reason] });
		const name = await nameOf(locals, grant, answer.personId);
		return { notice: `${name} is no longer ${roleInSentence(answer.role)} here.` };
	}
};

const refusals = {
	'not-waiting': 'This role does not wait for anybody any more. The list below is up to date.',
	'own-role': 'You gave this role or are to have it; somebody else must confirm it.',
	'forbidden-pair': 'They hold or held another role here that this one must not join.',
	'no-such-role': 'This role has ended already. The list below is up to date.'
};

async function nameOf(locals: App.Locals, grant: Grant, personId: string): Promise<string> {
	const members = await listMemberNames(locals.db, grant.labId);
	return members.find(({ id }) => id === personId)?.name ?? 'They';
}

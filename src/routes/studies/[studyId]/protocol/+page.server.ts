import { error, fail, redirect } from '@sveltejs/kit';
import { setError, superValidate } from 'sveltekit-superforms';
import { zod4 } from 'sveltekit-superforms/adapters';
import { z } from 'zod';
import { letterMaxBytes } from '$lib/protocol/letter-type';
import { answerSchema, commentSchema, resolveSchema } from '$lib/protocol/comment';
import { ethicsApprovalSchema } from '$lib/protocol/ethics-approval';
import { permissions } from '$lib/server/access/permissions';
import { requirePermission } from '$lib/server/access/require-permission';
import { listApprovals } from '$lib/server/ethics/list-approvals';
import { recordApproval } from '$lib/server/ethics/record-approval';
import { loadComments } from '$lib/server/comments/load-comments';
import { answerComment, resolveComment, writeComment } from '$lib/server/comments/write-comment';
import { loadApprovalEnd } from '$lib/server/ethics/find-approval-end';
import { storeLetter } from '$lib/server/ethics/store-letter';
import { revokeApproval } from '$lib/server/ethics/revoke-approval';
import { loadProtocol } from '$lib/server/protocols/load-protocol';
import { startDraft } from '$lib/server/protocols/start-draft';
import { loadProgress } from '$lib/server/studies/load-progress';
import { loadStudyZone } from '$lib/server/studies/load-study-zone';
import { formatWithZone } from '$lib/time/format-instant';
import type { Actions, PageServerLoad } from './$types';

const commenters = permissions['comment:write'].roles;
const numberSchema = z.coerce.number().int().positive();

export const load: PageServerLoad = async ({ locals, params, url }) => {
	const grant = await requirePermission(locals, 'protocol:read', params);
	const { db, clock } = locals;
	const wanted = url.searchParams.get('version');
	const number = wanted === null ? undefined : numberSchema.safeParse(wanted).data;
	if (wanted !== null && number === undefined) error(404, 'Not found');
	const protocol = await loadProtocol(db, grant, { number });
	if (number !== undefined && !protocol.shown) error(404, 'Not found');
	const zone = await loadStudyZone(db, grant.studyId);
	const threads = protocol.shown
		? await loadComments(db, grant, {
				versionId: protocol.shown.id,
				parts: protocol.shown.parts
			})
		: [];
	const mayEdit = grant.roles.includes('investigator');
	const defaults = { protocolHash: protocol.shown?.hash ?? '' };
	return {
		...protocol,
		frozenText: protocol.shown ? formatWithZone(protocol.shown.frozenAtMs, zone) : '',
		justFrozen: url.searchParams.get('frozen') === String(protocol.shown?.number),
		zone,
		threads,
		mayComment: commenters.some((role) => grant.roles.includes(role)),
		commentOn: url.searchParams.get('on') ?? '',
		approvals: await listApprovals(db, clock, grant),
		approvalEnd: await loadApprovalEnd(db, clock, grant),
		progress: await loadProgress(db, clock, grant),
		mayEdit,
		mayRehearse: mayEdit || grant.roles.includes('statistician'),
		ethicsForm: mayEdit
			? await superValidate(defaults, zod4(ethicsApprovalSchema), { errors: false })
			: null
	};
};

const draftRefusals = {
	'draft-exists': 'Another version is being written already.',
	'nothing-frozen': 'No version is frozen yet: go on with the first draft.'
};

const letterRefusals = {
	empty: 'The file is empty. Choose the scanned letter.',
	'too-large': 'The file is over 10 MB. Scan it in grey at 150 dots an inch, or split it.',
	'unknown-kind':
		'This is neither PDF, PNG nor JPEG, whatever its name says. Save the letter as PDF.',
	'no-such-approval': 'This study has no such approval. Load the page again.',
	'kept-already': 'This very file is kept for that approval already.'
};

export const actions: Actions = {
	comment: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'comment:write', params);
		const data = Object.fromEntries(await request.formData());
		const input = commentSchema.safeParse(data);
		const typed = String(data.body ?? '');
		if (!input.success) {
			const [issue] = input.error.issues;
			return fail(400, { commentRefused: `${issue?.message ?? 'Write a comment'}.`, typed });
		}
		const written = await writeComment(locals.db, locals.clock, grant, input.data);
		if (written.ok) return { commentId: written.id };
		const text = 'This version has no such place. Choose another and leave the comment again.';
		return fail(409, { commentRefused: text, typed });
	},
	answer: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'comment:write', params);
		const input = answerSchema.safeParse(Object.fromEntries(await request.formData()));
		const written = input.success
			? await answerComment(locals.db, locals.clock, grant, input.data)
			: { ok: false as const };
		if (written.ok) return { commentId: written.id };
		return fail(409, { refused: 'The answer is empty, too long, or its comment is gone.' });
	},
	resolve: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'comment:write', params);
		const input = resolveSchema.safeParse(Object.fromEntries(await request.formData()));
		if (!input.success) return fail(400, { refused: 'Load the page again.' });
		const { commentId, resolved } = input.data;
		const change = { commentId, resolved: resolved === 'yes' };
		const done = await resolveComment(locals.db, locals.clock, grant, change);
		return done.ok ? { resolved: true } : fail(409, { refused: 'There is no such comment.' });
	},
	letter: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'ethics:record', params);
		const data = await request.formData();
		const file = data.get('letter');
		const approvalId = z.uuid().safeParse(data.get('approvalId')).data;
		if (!(file instanceof File) || file.name === '' || !approvalId) {
			return fail(400, { refused: 'Choose the approval and the file of its letter.' });
		}
		if (file.size > letterMaxBytes) return fail(400, { refused: letterRefusals['too-large'] });
		const content = new Uint8Array(await file.arrayBuffer());
		const input = { approvalId, fileName: file.name, content };
		const kept = await storeLetter(locals.db, locals.clock, grant, input);
		if (!kept.ok) return fail(409, { refused: letterRefusals[kept.reason] });
		return { letterKept: kept.sha256.slice(0, 12) };
	},
	draft: async ({ locals, params }) => {
		const grant = await requirePermission(locals, 'protocol:edit', params);
		const started = await startDraft(locals.db, locals.clock, grant);
		if (!started.ok && started.reason !== 'draft-exists') {
			return fail(409, { refused: draftRefusals[started.reason] });
		}
		redirect(303, `/studies/${grant.studyId}/protocol/draft`);
	},
	approve: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'ethics:record', params);
		const form = await superValidate(request, zod4(ethicsApprovalSchema));
		if (!form.valid) return { form };
		const recorded = await recordApproval(locals.db, locals.clock, grant, form.data);
		if (recorded.ok) return { form, recordedNumber: recorded.versionNumber };
		if (recorded.reason === 'unknown-version') {
			return setError(form, 'protocolHash', 'This study has no version with that hash.');
		}
		return recorded.reason === 'not-yet-given'
			? setError(form, 'approvedOn', 'This day lies ahead; record the approval once it is given.')
			: setError(form, 'expiresOn', 'This approval has ended already; record its renewal.');
	},
	revoke: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'ethics:record', params);
		const approvalId = z.uuid().safeParse((await request.formData()).get('approvalId'));
		const revoked = approvalId.success
			? await revokeApproval(locals.db, locals.clock, grant, { approvalId: approvalId.data })
			: { ok: false as const };
		return revoked.ok
			? { revoked: true }
			: fail(409, { refused: 'This approval no longer stands.' });
	}
};

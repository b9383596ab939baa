import { json } from '@sveltejs/kit';
import { saveDraftBodySchema, type SaveDraftReply } from '$lib/protocol/save-draft-request';
import { requirePermission } from '$lib/server/access/require-permission';
import { saveDraft } from '$lib/server/protocols/save-draft';
import type { RequestHandler } from './$types';

/** Saves the draft that its form holds. */
export const PUT: RequestHandler = async ({ locals, params, request }) => {
	const grant = await requirePermission(locals, 'protocol:edit', params);
	const body = saveDraftBodySchema.safeParse(await request.json().catch(() => null));
	if (!body.success) {
		const faults = body.error.issues.map(({ path, message }) => `${path.join('.')}: ${message}`);
		return reply({ state: 'refused', faults }, 422);
	}
	const saved = await saveDraft(locals.db, grant, body.data);
	if (saved.ok) {
		return reply({ state: 'saved', revision: saved.revision, enteredBy: saved.enteredBy });
	}
	if (saved.reason === 'out-of-range')
		return reply({ state: 'refused', faults: saved.faults }, 422);
	if (saved.reason === 'no-draft') return reply({ state: 'gone' }, 409);
	return reply({ state: 'stale', revision: saved.revision, draft: saved.draft }, 409);
};

function reply(body: SaveDraftReply, status = 200): Response {
	return json(body, { status });
}

import { error, fail, redirect } from '@sveltejs/kit';
import { z } from 'zod';
import { writeRegistryText } from '$lib/protocol/reporting/registry-text';
import { isAllowed } from '$lib/server/access/permissions';
import { requirePermission } from '$lib/server/access/require-permission';
import { importProtocol, type ImportOutcome } from '$lib/server/protocols/import-protocol';
import { loadDocument } from '$lib/server/protocols/load-document';
import { loadProtocol } from '$lib/server/protocols/load-protocol';
import type { Actions, PageServerLoad } from './$types';

const largestFile = 4 * 1024 * 1024;

export const load: PageServerLoad = async ({ locals, params, url }) => {
	const grant = await requirePermission(locals, 'protocol:read', params);
	const wanted = url.searchParams.get('version') ?? undefined;
	const number = z.coerce.number().int().positive().optional().safeParse(wanted);
	if (!number.success) error(404, 'Not found');
	const facts = await loadDocument(locals.db, locals.clock, grant, { number: number.data });
	if (!facts && number.data !== undefined) error(404, 'Not found');
	const { draftNumber } = await loadProtocol(locals.db, grant, { number: number.data });
	const standing = { isMember: true, isSteward: grant.isSteward, roles: grant.roles };
	return {
		version: facts && { number: facts.number, hash: facts.hash },
		registry: facts && writeRegistryText(facts),
		mayExport: isAllowed('protocol:export', standing),
		mayImport: isAllowed('protocol:edit', standing),
		draftNumber
	};
};

export const actions: Actions = {
	import: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'protocol:edit', params);
		const data = await request.formData();
		const file = data.get('file');
		if (!(file instanceof File) || file.name === '') {
			return fail(400, { refused: 'Choose an exported protocol first.', faults: [] });
		}
		if (file.size > largestFile) {
			return fail(400, { refused: 'The file is over 4 MB: this is no protocol.', faults: [] });
		}
		const input = { text: await file.text(), replaceDraft: data.get('replaceDraft') === 'on' };
		const imported = await importProtocol(locals.db, locals.clock, grant, input);
		if (imported.ok) redirect(303, `/studies/${grant.studyId}/protocol/draft`);
		return fail(409, tellRefusal(imported));
	}
};

function tellRefusal(refusal: Extract<ImportOutcome, { ok: false }>) {
	const faults = 'faults' in refusal ? refusal.faults : [];
	switch (refusal.reason) {
		case 'not-json':
			return { refused: 'This file is not JSON. Choose the file that the export gave.', faults };
		case 'not-a-protocol':
			return { refused: 'This file is no exported protocol:', faults };
		case 'not-holdable':
			return {
				refused: 'The forms cannot hold this protocol whole, so nothing is imported:',
				faults
			};
		case 'hash-differs':
			return {
				refused: `The file states the hash ${refusal.stated.slice(0, 12)}…, its content has ${refusal.found.slice(0, 12)}…: it was changed since. Export it again.`,
				faults
			};
		default:
			return {
				refused: 'A version is being written. Tick that it may be replaced, or freeze it first.',
				faults
			};
	}
}

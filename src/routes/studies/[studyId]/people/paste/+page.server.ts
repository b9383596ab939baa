import { fail } from '@sveltejs/kit';
import { requirePermission } from '$lib/server/access/require-permission';
import { loadCellDefaults } from '$lib/server/people/check-rows';
import { enrolPeople } from '$lib/server/people/enrol-people';
import { previewRows } from '$lib/server/people/preview-rows';
import { splitPastedRows } from '$lib/server/people/split-pasted-rows';
import { runtimeKeys } from '$lib/server/runtime';
import { findMissingGates } from '$lib/server/studies/load-gates';
import type { Actions, PageServerLoad } from './$types';
import { readRowsForm } from './rows-form';

export const load: PageServerLoad = async ({ locals, params }) => {
	const grant = await requirePermission(locals, 'participant:enrol', params);
	return {
		studyId: grant.studyId,
		defaults: await loadCellDefaults(locals.db, grant),
		gates: await findMissingGates(locals.db, locals.clock, grant.studyId)
	};
};

const refusals = {
	'nothing-pasted': 'There is no row to read. Paste at least one line.',
	'too-many-rows': 'These are more than 500 rows. Paste them in parts.'
};

export const actions: Actions = {
	read: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'participant:enrol', params);
		const text = String((await request.formData()).get('text') ?? '');
		const found = splitPastedRows(text);
		if (!found.ok) return fail(422, { refused: refusals[found.reason], text });
		const { rows, separator, ignoredColumns } = found;
		const checked = await previewRows(locals.db, grant, { keys: runtimeKeys(), rows });
		return { checked, separator, ignoredColumns };
	},
	check: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'participant:enrol', params);
		const rows = readRowsForm(await request.formData());
		return { checked: await previewRows(locals.db, grant, { keys: runtimeKeys(), rows }) };
	},
	add: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'participant:enrol', params);
		const keys = runtimeKeys();
		const rows = readRowsForm(await request.formData());
		const outcome = await enrolPeople(locals.db, locals.clock, grant, { keys, rows });
		if (!outcome.ok) {
			const checked = await previewRows(locals.db, grant, { keys, rows });
			return fail(409, { refused: outcome.gates.map(({ text }) => text).join(' '), checked });
		}
		const { codes, stayed } = outcome;
		if (stayed.length === 0) return { codes };
		return { codes, checked: await previewRows(locals.db, grant, { keys, rows: stayed }) };
	}
};

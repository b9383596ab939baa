import { fail } from '@sveltejs/kit';
import { requirePermission } from '$lib/server/access/require-permission';
import { readUploadForm } from '$lib/server/intake/read-upload-form';
import { loadVariables } from '$lib/server/intake/load-variables';
import { previewUpload, storeUpload } from '$lib/server/intake/store-upload';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params }) => {
	const grant = await requirePermission(locals, 'trials:upload', params);
	return { variables: await loadVariables(locals.db, locals.clock, grant.studyId) };
};

export const actions: Actions = {
	check: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'trials:upload', params);
		const form = await readUploadForm(await request.formData());
		if (!form.ok) return fail(422, { refused: form.message });
		const preview = await previewUpload(locals.db, locals.clock, grant, form.file);
		return preview.ok
			? { preview: { ...preview, fileName: form.file.name } }
			: fail(422, { refused: preview.message, fileName: form.file.name });
	},
	store: async ({ locals, params, request }) => {
		const grant = await requirePermission(locals, 'trials:upload', params);
		const form = await readUploadForm(await request.formData());
		if (!form.ok) return fail(422, { refused: form.message });
		const stored = await storeUpload(locals.db, locals.clock, grant, form.file);
		if (stored.ok) return { stored: { ...stored, fileName: form.file.name } };
		if (stored.reason === 'same-file') return { same: { fileName: form.file.name } };
		if (stored.reason === 'unreadable') return fail(422, { refused: stored.message });
		const preview = await previewUpload(locals.db, locals.clock, grant, form.file);
		return preview.ok
			? fail(422, { preview: { ...preview, fileName: form.file.name } })
			: fail(422, { refused: preview.message });
	}
};

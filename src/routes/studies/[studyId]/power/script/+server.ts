import { error } from '@sveltejs/kit';
import { z } from 'zod';
import { requirePermission } from '$lib/server/access/require-permission';
import { writeVersionScript } from '$lib/server/power/write-version-script';
import type { RequestHandler } from './$types';

const numberSchema = z.coerce.number().int().positive();

/** The R script of one version, to be run on another machine. */
export const GET: RequestHandler = async ({ locals, params, url }) => {
	const grant = await requirePermission(locals, 'power:read', params);
	const number = numberSchema.safeParse(url.searchParams.get('version'));
	const script = number.success
		? await writeVersionScript(locals.db, grant, { number: number.data })
		: null;
	if (!script) error(404, 'Not found');
	return new Response(script.text, {
		headers: {
			'content-type': 'text/plain; charset=utf-8',
			'content-disposition': `attachment; filename="${script.fileName}"`
		}
	});
};

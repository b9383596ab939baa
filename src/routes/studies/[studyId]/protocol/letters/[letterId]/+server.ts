import { error } from '@sveltejs/kit';
import { z } from 'zod';
import { requirePermission } from '$lib/server/access/require-permission';
import { loadLetter } from '$lib/server/ethics/load-letter';
import type { RequestHandler } from './$types';

/** The scanned letter of an approval, as it came. */
export const GET: RequestHandler = async ({ locals, params }) => {
	const grant = await requirePermission(locals, 'ethics:read', params);
	const letterId = z.uuid().safeParse(params.letterId).data;
	const letter = letterId ? await loadLetter(locals.db, grant, letterId) : null;
	if (!letter) error(404, 'Not found');
	const name = encodeURIComponent(letter.fileName);
	return new Response(new Uint8Array(letter.content), {
		headers: {
			'content-type': letter.mediaType,
			'content-disposition': `attachment; filename*=UTF-8''${name}`,
			'content-security-policy': "default-src 'none'; sandbox",
			'x-content-type-options': 'nosniff',
			'cache-control': 'private, no-store'
		}
	});
};

import { error } from '@sveltejs/kit';
import { z } from 'zod';
import { requirePermission } from '$lib/server/access/require-permission';
import { loadBlockFile } from '$lib/server/visits/load-block-file';
import type { RequestHandler } from './$types';

const placeSchema = z.object({
	bookingId: z.uuid(),
	blockNumber: z.coerce.number().int().min(1).max(1000)
});

/** The signed and encrypted file of one ready block. */
export const GET: RequestHandler = async ({ locals, params }) => {
	const grant = await requirePermission(locals, 'bundle:fetch', params);
	const place = placeSchema.safeParse(params);
	if (!place.success) error(404, 'Not found');
	const file = await loadBlockFile(locals.db, locals.clock, grant, place.data);
	if (!file) error(404, 'Not found');
	return new Response(Buffer.from(file.content), {
		headers: {
			'content-type': 'application/jose',
			'content-disposition': `attachment; filename="${file.fileName}"`
		}
	});
};

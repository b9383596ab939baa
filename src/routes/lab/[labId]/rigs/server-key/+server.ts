import { requirePermission } from '$lib/server/access/require-permission';
import { runtimeSigningKey } from '$lib/server/runtime';
import type { RequestHandler } from './$types';

/** The public half of the key that signs block files, as a JSON Web Key: each rig keeps it. */
export const GET: RequestHandler = async ({ locals, params }) => {
	await requirePermission(locals, 'lab:read', params);
	const { publicJwk } = await runtimeSigningKey();
	return new Response(`${JSON.stringify(publicJwk, null, 2)}\n`, {
		headers: {
			'content-type': 'application/json',
			'content-disposition': 'attachment; filename="ovalry-public-key.json"'
		}
	});
};

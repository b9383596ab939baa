import { json } from '@sveltejs/kit';
import { z } from 'zod';
import { requirePermission } from '$lib/server/access/require-permission';
import { loadWeek } from '$lib/server/bookings/load-week';
import type { RequestHandler } from './$types';

const dateSchema = z.iso.date().optional().catch(undefined);

/** A week of the lab's rigs, for the open page to look again. */
export const GET: RequestHandler = async ({ locals, params, url }) => {
	const grant = await requirePermission(locals, 'booking:read', params);
	const date = dateSchema.parse(url.searchParams.get('date') ?? undefined);
	return json(await loadWeek(locals.db, locals.clock, grant, { date }));
};

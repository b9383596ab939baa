import { z } from 'zod';
import { requirePermission } from '$lib/server/access/require-permission';
import { loadWeek } from '$lib/server/bookings/load-week';
import { loadVisits } from '$lib/server/bookings/load-visits';
import { findMissingGates } from '$lib/server/studies/load-gates';
import { localDateOf } from '$lib/time/wall-clock';
import type { PageServerLoad } from './$types';

const querySchema = z.object({
	week: z.iso.date().optional().catch(undefined),
	view: z.enum(['week', 'list']).catch('week'),
	visit: z.uuid().optional().catch(undefined)
});

export const load: PageServerLoad = async ({ locals, params, url }) => {
	const grant = await requirePermission(locals, 'booking:read', params);
	const { db, clock } = locals;
	const query = querySchema.parse(Object.fromEntries(url.searchParams));
	const week = await loadWeek(db, clock, grant, { date: query.week });
	const bookingIds = query.visit ? [query.visit] : [];
	const [chosen] = await loadVisits(db, grant, { bookingIds });
	const chosenDate = chosen && localDateOf(chosen.startMs, week.zone);
	const isElsewhere = chosenDate && !query.week && chosenDate < week.monday;
	return {
		studyId: grant.studyId,
		view: query.view,
		chosen: chosen?.bookingId ?? null,
		week:
			chosenDate && !query.week && !isElsewhere
				? await loadWeek(db, clock, grant, { date: chosenDate })
				: week,
		gates: await findMissingGates(db, clock, grant.studyId)
	};
};

import { error, json } from '@sveltejs/kit';
import { z } from 'zod';
import { placeQuestionSchema } from '$lib/bookings/week';
import { requirePermission } from '$lib/server/access/require-permission';
import { judgeDrop, judgeWeek } from '$lib/server/bookings/judge-week';
import type { RequestHandler } from './$types';

const minute = z.coerce.number().int().min(0).max(1440);
const questionSchema = z.object({
	bookingId: z.uuid(),
	date: z.iso.date(),
	fromMinute: minute,
	toMinute: minute
});

/** Where a visit may go in a week, and which rule refuses it elsewhere. */
export const GET: RequestHandler = async ({ locals, params, url }) => {
	const grant = await requirePermission(locals, 'booking:read', params);
	const question = questionSchema.safeParse(Object.fromEntries(url.searchParams));
	if (!question.success) error(422, 'A visit and a week are expected');
	return json(await judgeWeek(locals.db, locals.clock, grant, question.data));
};

/** One place, as after a drop. */
export const POST: RequestHandler = async ({ locals, params, request }) => {
	const grant = await requirePermission(locals, 'booking:read', params);
	const question = placeQuestionSchema.safeParse(await request.json().catch(() => null));
	if (!question.success) error(422, 'A visit and a place are expected');
	const reply = await judgeDrop(locals.db, locals.clock, grant, question.data);
	if (!reply) error(404, 'Not found');
	return json(reply);
};

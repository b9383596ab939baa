import { error, json } from '@sveltejs/kit';
import { moveBodySchema, type MoveReply } from '$lib/bookings/week';
import { requirePermission } from '$lib/server/access/require-permission';
import { explainRefusal } from '$lib/server/bookings/explain-refusal';
import { savePlan } from '$lib/server/bookings/save-plan';
import { config } from '$lib/server/config';
import { mailSettingOf } from '$lib/server/invitations/mail-setting';
import { runtimeKeys } from '$lib/server/runtime';
import type { RequestHandler } from './$types';

/** Moves visits of one person, all of them or none. */
export const POST: RequestHandler = async ({ locals, params, request }) => {
	const grant = await requirePermission(locals, 'booking:change', params);
	const body = moveBodySchema.safeParse(await request.json().catch(() => null));
	if (!body.success) error(422, 'A person and places are expected');
	const mail = mailSettingOf(config(), runtimeKeys());
	const saved = await savePlan(locals.db, locals.clock, grant, { ...body.data, mail });
	const reply: MoveReply = saved.ok
		? {
				ok: true,
				movedCount: saved.movedCount,
				bookedCount: saved.bookedCount,
				mailCount: saved.mailCount
			}
		: { ok: false, ...explainRefusal(saved) };
	return json(reply);
};

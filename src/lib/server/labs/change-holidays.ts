import { and, eq } from 'drizzle-orm';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Database } from '$lib/server/db/client';
import { holiday } from '$lib/server/db/schema';
import type { Holiday } from '$lib/labs/holiday-lines';
import { recordLabEvent } from './record-lab-event';

/** Closes the lab on these days; a day that was closed already takes the new name. */
export async function addHolidays(
	db: Database,
	clock: Clock,
	grant: Grant<'lab:manage'>,
	holidays: Holiday[]
): Promise<void> {
	if (holidays.length === 0) return;
	await db.transaction(async (tx) => {
		for (const { on, name } of holidays) {
			await tx
				.insert(holiday)
				.values({ labId: grant.labId, on, name })
				.onConflictDoUpdate({ target: [holiday.labId, holiday.on], set: { name } });
		}
		await recordLabEvent(tx, clock, grant, { kind: 'holidays-added', body: { holidays } });
	});
}

export type RemoveHolidayAnswer =
	{ ok: true; removed: Holiday } | { ok: false; reason: 'no-such-holiday' };

/** Opens the lab again on one day. */
export async function removeHoliday(
	db: Database,
	clock: Clock,
	grant: Grant<'lab:manage'>,
	id: string
): Promise<RemoveHolidayAnswer> {
	return db.transaction(async (tx) => {
		const [removed] = await tx
			.delete(holiday)
			.where(and(eq(holiday.id, id), eq(holiday.labId, grant.labId)))
			.returning({ on: holiday.on, name: holiday.name });
		if (!removed) return { ok: false, reason: 'no-such-holiday' };
		await recordLabEvent(tx, clock, grant, { kind: 'holiday-removed', body: removed });
		return { ok: true, removed };
	});
}

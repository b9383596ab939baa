import { eq } from 'drizzle-orm';
import type { Queryable } from '$lib/server/db/client';
import { booking, room } from '$lib/server/db/schema';
import { loadRecipient, type Recipient } from './load-recipient';
import type { MailSetting } from './mail-setting';
import { placeOf } from './visit-mail';
import type { ToldVisit } from './sealed-mail';

export interface VisitToTell {
	booking: typeof booking.$inferSelect;
	recipient: Recipient;
	room: { name: string; directions: string };
	/** Time and place as they stand now. */
	told: ToldVisit;
}

/**
 * One booked visit with everything a mail about it tells. Locks the booking, so that two changes of
 * one visit are written in their order.
 *
 * @throws RangeError when there is no such booking.
 */
export async function loadVisit(
	tx: Queryable,
	setting: MailSetting,
	bookingId: string
): Promise<{ ok: true; visit: VisitToTell } | { ok: false; reason: 'erased' }> {
	const [row] = await tx
		.select({ booking, room })
		.from(booking)
		.innerJoin(room, eq(room.id, booking.roomId))
		.where(eq(booking.id, bookingId))
		.for('update', { of: booking });
	if (!row) throw new RangeError('No booking has this id');
	const found = await loadRecipient(tx, setting, row.booking.participantId);
	if (!found.ok) return found;
	const { recipient } = found;
	const { name, directions } = row.room;
	const told = {
		startMs: row.booking.during.startsAt.getTime(),
		endMs: row.booking.during.endsAt.getTime(),
		place: placeOf({ lab: recipient.lab, room: { name } })
	};
	return {
		ok: true,
		visit: { booking: row.booking, recipient, room: { name, directions }, told }
	};
}

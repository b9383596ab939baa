import { and, asc, eq, gt, inArray, sql } from 'drizzle-orm';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import { yokingSettingsSchema } from '$scheduler/policies/yoking/yoked-rule';
import type { Transaction } from '$lib/server/db/client';
import { booking } from '$lib/server/db/schema';

const quarterHourMs = 900_000;

type Behind = { masterId: string; content: ProtocolContent; drawn: Date };

/**
 * When a yoked person may start: so many hours behind the first visit of their master's chain after
 * baseline, or the start that was drawn where that is later or the master has nothing booked.
 */
export async function findStartBehind(
	tx: Transaction,
	{ masterId, content, drawn }: Behind
): Promise<Date> {
	const [first] = await tx
		.select({ during: booking.during })
		.from(booking)
		.where(
			and(
				eq(booking.participantId, masterId),
				gt(booking.visitNumber, 1),
				inArray(booking.state, ['booked', 'attended'])
			)
		)
		.orderBy(asc(sql`lower(${booking.during})`))
		.limit(1);
	if (!first) return drawn;
	const { leadHours } = yokingSettingsSchema.parse(content.yoking ?? {});
	const behindMs = first.during.endsAt.getTime() + leadHours * 3_600_000;
	const startMs = Math.ceil(behindMs / quarterHourMs) * quarterHourMs;
	return new Date(Math.max(startMs, drawn.getTime()));
}

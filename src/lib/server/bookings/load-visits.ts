import { and, asc, eq, inArray, sql } from 'drizzle-orm';
import type { Grant } from '$lib/server/access/require-permission';
import type { Queryable } from '$lib/server/db/client';
import { booking, rig, room, staff, type Answer, type BookingState } from '$lib/server/db/schema';

/** One booking of a participant, whatever became of it. */
export type StudyVisit = {
	bookingId: string;
	participantId: string;
	visitNumber: number;
	rigId: string;
	rigName: string;
	roomName: string;
	staffId: string;
	staffName: string;
	startMs: number;
	endMs: number;
	/** With set-up and clean-up. */
	occupiedFromMs: number;
	occupiedToMs: number;
	state: BookingState;
	sequence: number;
	invitedAtMs: number | null;
	answer: Answer;
	answeredAtMs: number | null;
	hasAnswerNote: boolean;
	requestSettledAtMs: number | null;
	changedAtMs: number;
};

export type VisitGrant = Grant<
	| 'booking:read'
	| 'booking:change'
	| 'attendance:record'
	| 'participant:list'
	| 'participant:withdraw'
	| 'message:read'
	| 'today:read'
>;

type Which = { participantId?: string; bookingIds?: readonly string[] };

/** Bookings of the grant's study in order of time: all of them, one person's, or some by id. */
export async function loadVisits(
	db: Queryable,
	grant: VisitGrant,
	{ participantId, bookingIds }: Which = {}
): Promise<StudyVisit[]> {
	if (bookingIds?.length === 0) return [];
	const rows = await db
		.select({ booking, rigName: rig.name, roomName: room.name, staffName: staff.name })
		.from(booking)
		.innerJoin(rig, eq(rig.id, booking.rigId))
		.innerJoin(room, eq(room.id, booking.roomId))
		.innerJoin(staff, eq(staff.id, booking.staffId))
		.where(
			and(
				eq(booking.studyId, grant.studyId),
				participantId ? eq(booking.participantId, participantId) : undefined,
				bookingIds ? inArray(booking.id, [...bookingIds]) : undefined
			)
		)
		.orderBy(asc(sql`lower(${booking.during})`), asc(booking.id));
	return rows.map(({ booking: row, ...names }) => shapeVisit(row, names));
}

function shapeVisit(
	row: typeof booking.$inferSelect,
	names: { rigName: string; roomName: string; staffName: string }
): StudyVisit {
	return {
		bookingId: row.id,
		participantId: row.participantId,
		visitNumber: row.visitNumber,
		rigId: row.rigId,
		staffId: row.staffId,
		...names,
		startMs: row.during.startsAt.getTime(),
		endMs: row.during.endsAt.getTime(),
		occupiedFromMs: row.occupied.startsAt.getTime(),
		occupiedToMs: row.occupied.endsAt.getTime(),
		state: row.state,
		sequence: row.sequence,
		invitedAtMs: row.invitedAt?.getTime() ?? null,
		answer: row.answer,
		answeredAtMs: row.answeredAt?.getTime() ?? null,
		hasAnswerNote: row.answerNote !== null,
		requestSettledAtMs: row.requestSettledAt?.getTime() ?? null,
		changedAtMs: row.changedAt.getTime()
	};
}

/** Whether the booking holds its place: neither cancelled nor missed. */
export function isLive({ state }: Pick<StudyVisit, 'state'>): boolean {
	return state === 'booked' || state === 'attended';
}

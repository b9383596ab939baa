import { and, eq, gt, inArray, ne, sql } from 'drizzle-orm';
import type { Queryable } from '$lib/server/db/client';
import { booking, holiday, lab, rig, room, staff, weeklyHours } from '$lib/server/db/schema';
import type { Interval, LabCalendar, Weekday, WeeklyWindow } from '$scheduler/booking/types.ts';

/** The lab's calendar as the engine reads it, with the names that sentences use. */
export type NamedCalendar = {
	calendar: LabCalendar;
	labName: string;
	rigs: { id: string; name: string; roomId: string; isRetired: boolean }[];
	staffNames: ReadonlyMap<string, string>;
	roomNames: ReadonlyMap<string, string>;
	holidayNames: ReadonlyMap<string, string>;
};

type Options = {
	labId: string;
	/** Bookings that ended before it are of no interest; without it none is loaded. */
	fromMs?: number;
	/** Whose visits are judged: they must not stand in their own way. */
	exceptParticipantId?: string;
};

/**
 * Rigs, rooms and staff with their hours and what is booked on them, in every study of the lab.
 * A retired rig and a staff member who left stay in the list, without hours.
 */
export async function loadLabCalendar(db: Queryable, options: Options): Promise<NamedCalendar> {
	const { labId } = options;
	const [home] = await db.select().from(lab).where(eq(lab.id, labId));
	if (!home) throw new RangeError('a calendar requires a lab that exists');
	const rigs = await db.select().from(rig).where(eq(rig.labId, labId)).orderBy(rig.name, rig.id);
	const rooms = await db.select().from(room).where(eq(room.labId, labId));
	const people = await db
		.select()
		.from(staff)
		.where(eq(staff.labId, labId))
		.orderBy(staff.name, staff.id);
	const closed = await db.select().from(holiday).where(eq(holiday.labId, labId));
	const hours = await loadHours(db, labId);
	const busy = await loadBusy(db, options);
	return {
		labName: home.name,
		rigs: rigs.map(({ id, name, roomId, retiredAt }) => {
			return { id, name, roomId, isRetired: retiredAt !== null };
		}),
		staffNames: new Map(people.map(({ id, name }) => [id, name])),
		roomNames: new Map(rooms.map(({ id, name }) => [id, name])),
		holidayNames: new Map(closed.map(({ on, name }) => [on, name])),
		calendar: {
			zone: home.zone,
			holidays: closed.map(({ on }) => on),
			rigs: rigs.map(({ id, roomId, retiredAt }) => ({
				id,
				roomId,
				hours: retiredAt ? [] : (hours.get(id) ?? []),
				busy: busy.rigs.get(id) ?? []
			})),
			rooms: rooms.map(({ id }) => ({ id, busy: busy.rooms.get(id) ?? [] })),
			staff: people.map(({ id, endedAt }) => ({
				id,
				hours: endedAt ? [] : (hours.get(id) ?? []),
				busy: busy.staff.get(id) ?? []
			}))
		}
	};
}

/** Weekly hours by rig or staff member. */
async function loadHours(db: Queryable, labId: string): Promise<Map<string, WeeklyWindow[]>> {
	const rows = await db.select().from(weeklyHours).where(eq(weeklyHours.labId, labId));
	const found = new Map<string, WeeklyWindow[]>();
	for (const row of rows) {
		addTo(found, row.rigId ?? row.staffId ?? '', {
			weekday: row.weekday as Weekday,
			fromMinute: row.opensMinute,
			toMinute: row.closesMinute
		});
	}
	return found;
}

type Busy = Record<'rigs' | 'rooms' | 'staff', Map<string, Interval[]>>;

async function loadBusy(db: Queryable, options: Options): Promise<Busy> {
	const { labId, fromMs, exceptParticipantId } = options;
	const busy: Busy = { rigs: new Map(), rooms: new Map(), staff: new Map() };
	if (fromMs === undefined) return busy;
	const rows = await db
		.select({
			rigId: booking.rigId,
			roomId: booking.roomId,
			staffId: booking.staffId,
			occupied: booking.occupied
		})
		.from(booking)
		.innerJoin(rig, eq(rig.id, booking.rigId))
		.where(
			and(
				eq(rig.labId, labId),
				inArray(booking.state, ['booked', 'attended']),
				gt(sql`upper(${booking.occupied})`, sql`${new Date(fromMs).toISOString()}::timestamptz`),
				exceptParticipantId ? ne(booking.participantId, exceptParticipantId) : undefined
			)
		);
	for (const { rigId, roomId, staffId, occupied } of rows) {
		const interval = { fromMs: occupied.startsAt.getTime(), toMs: occupied.endsAt.getTime() };
		addTo(busy.rigs, rigId, interval);
		addTo(busy.rooms, roomId, interval);
		addTo(busy.staff, staffId, interval);
	}
	return busy;
}

function addTo<Value>(map: Map<string, Value[]>, key: string, value: Value): void {
	const list = map.get(key);
	if (list) list.push(value);
	else map.set(key, [value]);
}

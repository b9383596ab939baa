import { and, asc, eq, gte, isNull } from 'drizzle-orm';
import type { Grant } from '$lib/server/access/require-permission';
import type { Queryable } from '$lib/server/db/client';
import { holiday, lab, rig, room, staff, weeklyHours, type RigLimits } from '$lib/server/db/schema';
import type { OpenHours } from '$lib/labs/weekly-hours';

export type LabGrant = Grant<'lab:read' | 'lab:manage'>;
export type LabView = {
	id: string;
	name: string;
	zone: string;
	address: string;
	phone: string;
	email: string;
};

export async function loadLab(db: Queryable, grant: LabGrant): Promise<LabView> {
	const [row] = await db
		.select({
			id: lab.id,
			name: lab.name,
			zone: lab.zone,
			address: lab.address,
			phone: lab.phone,
			email: lab.email
		})
		.from(lab)
		.where(eq(lab.id, grant.labId));
	if (!row) throw new Error('the lab of a grant exists');
	return row;
}

export type RoomView = { id: string; name: string; directions: string; rigNames: string[] };

/** Rooms by name, each with the rigs that stand in it. */
export async function loadRooms(db: Queryable, grant: LabGrant): Promise<RoomView[]> {
	const rooms = await db
		.select({ id: room.id, name: room.name, directions: room.directions })
		.from(room)
		.where(eq(room.labId, grant.labId))
		.orderBy(asc(room.name));
	const rigs = await db
		.select({ name: rig.name, roomId: rig.roomId })
		.from(rig)
		.where(and(eq(rig.labId, grant.labId), isNull(rig.retiredAt)))
		.orderBy(asc(rig.name));
	return rooms.map((row) => ({
		...row,
		rigNames: rigs.filter((one) => one.roomId === row.id).map((one) => one.name)
	}));
}

export type RigView = {
	id: string;
	name: string;
	roomId: string;
	roomName: string;
	limits: RigLimits;
	publicKey: Record<string, unknown> | null;
	isRetired: boolean;
	hours: OpenHours[];
};

/** Rigs by name, the retired ones last. */
export async function loadRigs(db: Queryable, grant: LabGrant): Promise<RigView[]> {
	const rows = await db
		.select({
			id: rig.id,
			name: rig.name,
			roomId: rig.roomId,
			roomName: room.name,
			limits: rig.limits,
			publicKey: rig.publicKey,
			retiredAt: rig.retiredAt
		})
		.from(rig)
		.innerJoin(room, eq(room.id, rig.roomId))
		.where(eq(rig.labId, grant.labId))
		.orderBy(asc(rig.name));
	const hours = await loadHours(db, grant.labId);
	return rows
		.map(({ retiredAt, ...row }) => ({
			...row,
			isRetired: retiredAt !== null,
			hours: hours.get(row.id) ?? []
		}))
		.toSorted((a, b) => Number(a.isRetired) - Number(b.isRetired));
}

export type StaffView = {
	id: string;
	name: string;
	personId: string | null;
	hasEnded: boolean;
	hours: OpenHours[];
};

/** Staff by name, those who left last. */
export async function loadStaff(db: Queryable, grant: LabGrant): Promise<StaffView[]> {
	const rows = await db
		.select({ id: staff.id, name: staff.name, personId: staff.personId, endedAt: staff.endedAt })
		.from(staff)
		.where(eq(staff.labId, grant.labId))
		.orderBy(asc(staff.name));
	const hours = await loadHours(db, grant.labId);
	return rows
		.map(({ endedAt, ...row }) => ({
			...row,
			hasEnded: endedAt !== null,
			hours: hours.get(row.id) ?? []
		}))
		.toSorted((a, b) => Number(a.hasEnded) - Number(b.hasEnded));
}

export type HolidayView = { id: string; on: string; name: string };

/** Closed days from a date on, in their order. */
export async function loadHolidays(
	db: Queryable,
	grant: LabGrant,
	fromDate: string
): Promise<HolidayView[]> {
	return db
		.select({ id: holiday.id, on: holiday.on, name: holiday.name })
		.from(holiday)
		.where(and(eq(holiday.labId, grant.labId), gte(holiday.on, fromDate)))
		.orderBy(asc(holiday.on));
}

/** What a lab still lacks before any visit can be booked in it, in the order of setting up. */
export type LabGap = 'room' | 'rig' | 'rig-hours' | 'rig-key' | 'staff' | 'staff-hours' | 'phone';

export async function findLabGaps(db: Queryable, grant: LabGrant): Promise<LabGap[]> {
	const [facts, rooms, rigs, people] = await Promise.all([
		loadLab(db, grant),
		loadRooms(db, grant),
		loadRigs(db, grant),
		loadStaff(db, grant)
	]);
	const usable = rigs.filter((one) => !one.isRetired);
	const present = people.filter((one) => !one.hasEnded);
	const gaps: [LabGap, boolean][] = [
		['phone', facts.phone === ''],
		['room', rooms.length === 0],
		['rig', usable.length === 0],
		['rig-hours', usable.some((one) => one.hours.length === 0)],
		['rig-key', usable.some((one) => one.publicKey === null)],
		['staff', present.length === 0],
		['staff-hours', present.some((one) => one.hours.length === 0)]
	];
	return gaps.filter(([, isOpen]) => isOpen).map(([gap]) => gap);
}

/** Weekly hours of everything in the lab that has any, by rig or staff id. */
async function loadHours(db: Queryable, labId: string): Promise<Map<string, OpenHours[]>> {
	const rows = await db
		.select()
		.from(weeklyHours)
		.where(eq(weeklyHours.labId, labId))
		.orderBy(asc(weeklyHours.weekday), asc(weeklyHours.opensMinute));
	const found = new Map<string, OpenHours[]>();
	for (const { rigId, staffId, weekday, opensMinute, closesMinute } of rows) {
		const owner = rigId ?? staffId ?? '';
		found.set(owner, [...(found.get(owner) ?? []), { weekday, opensMinute, closesMinute }]);
	}
	return found;
}

import { and, eq, inArray, sql } from 'drizzle-orm';
import type { Week, WeekVisit } from '$lib/bookings/week';
import { addDaysToDate } from '$lib/time/add-local-days';
import { startOfLocalDate } from '$lib/time/start-of-local-day';
import { localDateOf } from '$lib/time/wall-clock';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import {
	booking,
	participant,
	protocolVersion,
	rig,
	room,
	staff,
	type BookingState
} from '$lib/server/db/schema';
import { toWeekday, toDayNumber } from '$scheduler/booking/local-date.ts';
import type { LabCalendar } from '$scheduler/booking/types.ts';
import { subtractIntervals } from '$scheduler/booking/intervals.ts';
import { expandWeeklyHours } from '$scheduler/booking/weekly-hours.ts';
import { loadLabCalendar } from './load-lab-calendar';
import { loadPlanVersion } from './load-person-plan';

const shownStates: BookingState[] = ['booked', 'attended', 'no-show'];

/** The Monday of the week that holds a local date. */
export function mondayOf(date: string): string {
	return addDaysToDate(date, 1 - toWeekday(toDayNumber(date)));
}

/**
 * A week of the lab's rigs: this study's visits by code, other studies' as taken time without any
 * word about them.
 */
export async function loadWeek(
	db: Queryable,
	clock: Clock,
	grant: Grant<'booking:read'>,
	{ date }: { date?: string | undefined }
): Promise<Week> {
	const named = await loadLabCalendar(db, { labId: grant.labId });
	const { calendar } = named;
	const nowMs = clock.now();
	const monday = mondayOf(date ?? localDateOf(nowMs, calendar.zone));
	const dates = Array.from({ length: 7 }, (_, index) => addDaysToDate(monday, index));
	const fromMs = startOfLocalDate(monday, calendar.zone);
	const toMs = startOfLocalDate(addDaysToDate(monday, 7), calendar.zone);
	const visits = await loadWeekVisits(db, grant, { fromMs, toMs, nowMs });
	const rigs = named.rigs.filter(
		({ id, isRetired }) => !isRetired || visits.some((visit) => visit.rigId === id)
	);
	const isShown = (day: string) => isOpenDay(calendar, day) || hasVisit(visits, day, calendar.zone);
	return {
		zone: calendar.zone,
		nowMs,
		monday,
		days: dates
			.filter((day) => isShown(day))
			.map((day) => ({ date: day, closed: named.holidayNames.get(day) ?? null })),
		rigs: rigs.map(({ id, name }) => ({ id, name })),
		...findHours(calendar),
		closedTimes: rigs.flatMap(({ id }) => findClosedTimes(calendar, id, { fromMs, toMs })),
		visits,
		planVersion: await loadPlanVersion(db, grant.studyId)
	};
}

function isOpenDay({ rigs }: LabCalendar, date: string): boolean {
	const weekday = toWeekday(toDayNumber(date));
	const isWorkday = weekday <= 5;
	return isWorkday || rigs.some(({ hours }) => hours.some((window) => window.weekday === weekday));
}

function hasVisit(visits: readonly WeekVisit[], date: string, zone: string): boolean {
	return visits.some(({ startMs }) => localDateOf(startMs, zone) === date);
}

/** Whole hours from the first opening to the last closing of any rig. */
function findHours({ rigs }: LabCalendar): { fromMinute: number; toMinute: number } {
	const windows = rigs.flatMap(({ hours }) => hours);
	if (windows.length === 0) return { fromMinute: 8 * 60, toMinute: 18 * 60 };
	const from = Math.min(...windows.map(({ fromMinute }) => fromMinute));
	const to = Math.max(...windows.map(({ toMinute }) => toMinute));
	return { fromMinute: Math.floor(from / 60) * 60, toMinute: Math.ceil(to / 60) * 60 };
}

function findClosedTimes(
	{ zone, rigs, holidays }: LabCalendar,
	rigId: string,
	week: { fromMs: number; toMs: number }
): Week['closedTimes'] {
	const hours = rigs.find(({ id }) => id === rigId)?.hours ?? [];
	const closedDays = holidays.map((date) => ({
		fromMs: startOfLocalDate(date, zone),
		toMs: startOfLocalDate(addDaysToDate(date, 1), zone)
	}));
	const open = subtractIntervals(expandWeeklyHours(hours, zone, week), closedDays);
	return subtractIntervals([week], open).map((interval) => ({ rigId, ...interval }));
}

async function loadWeekVisits(
	db: Queryable,
	grant: Grant<'booking:read'>,
	{ fromMs, toMs, nowMs }: { fromMs: number; toMs: number; nowMs: number }
): Promise<WeekVisit[]> {
	const rows = await db
		.select({
			booking,
			code: participant.code,
			withdrawnAt: participant.withdrawnAt,
			labels: sql<{ number: number; label: string }[]>`${protocolVersion.content}->'visits'`,
			rigName: rig.name,
			roomName: room.name,
			staffName: staff.name
		})
		.from(booking)
		.innerJoin(participant, eq(participant.id, booking.participantId))
		.innerJoin(protocolVersion, eq(protocolVersion.id, participant.protocolVersionId))
		.innerJoin(rig, eq(rig.id, booking.rigId))
		.innerJoin(room, eq(room.id, booking.roomId))
		.innerJoin(staff, eq(staff.id, booking.staffId))
		.where(
			and(
				eq(rig.labId, grant.labId),
				inArray(booking.state, shownStates),
				sql`${booking.occupied} && tstzrange(${new Date(fromMs).toISOString()}, ${new Date(toMs).toISOString()})`
			)
		)
		.orderBy(sql`lower(${booking.during})`, booking.id);
	return rows.flatMap(({ booking: row, code, labels, withdrawnAt, ...names }): WeekVisit[] => {
		const startMs = row.during.startsAt.getTime();
		const times = {
			startMs,
			endMs: row.during.endsAt.getTime(),
			occupiedFromMs: row.occupied.startsAt.getTime(),
			occupiedToMs: row.occupied.endsAt.getTime()
		};
		if (row.studyId !== grant.studyId)
			return row.state === 'no-show' ? [] : [hide(row.rigId, times)];
		return [
			{
				bookingId: row.id,
				participantId: row.participantId,
				code,
				visitNumber: row.visitNumber,
				label: labels.find(({ number }) => number === row.visitNumber)?.label ?? '',
				rigId: row.rigId,
				...names,
				...times,
				state: row.state,
				answer: row.answer,
				isInvited: row.invitedAt !== null,
				mayMove: withdrawnAt === null && row.state === 'booked' && startMs > nowMs
			}
		];
	});
}

type Times = Pick<WeekVisit, 'startMs' | 'endMs' | 'occupiedFromMs' | 'occupiedToMs'>;

/** Another study's booking: the rig is taken, and nothing more. */
function hide(rigId: string, times: Times): WeekVisit {
	return {
		bookingId: `other ${rigId} ${times.occupiedFromMs}`,
		participantId: null,
		code: null,
		visitNumber: 0,
		label: '',
		rigId,
		rigName: '',
		roomName: '',
		staffName: '',
		...times,
		startMs: times.occupiedFromMs,
		endMs: times.occupiedToMs,
		state: 'booked',
		answer: 'none',
		isInvited: false,
		mayMove: false
	};
}

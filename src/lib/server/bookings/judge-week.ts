import type { z } from 'zod';
import type { movableReplySchema, PlaceReply } from '$lib/bookings/week';
import { addDaysToDate } from '$lib/time/add-local-days';
import { startOfLocalDate } from '$lib/time/start-of-local-day';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import { localToInstants } from '$lib/time/local-to-instants';
import { findWays, judgePlace, judgeWindow, loadMovable, type MovableVisit } from './judge-visit';
import { mondayOf } from './load-week';
import { noticeMs } from './propose-chains';
import { tellWay } from './tell-ways';

type Reply = z.input<typeof movableReplySchema>;

const refusals = {
	'not-found': ['Not there any more', 'This visit was cancelled meanwhile.'],
	over: ['Already over', 'A visit that is over, or has begun, is not moved.'],
	withdrawn: ['Withdrawn', 'This person has withdrawn.']
} as const;

/** Where a visit may go in the week of a date, hour by hour of the grid, and why not elsewhere. */
export async function judgeWeek(
	db: Queryable,
	clock: Clock,
	grant: Grant<'booking:read'>,
	{ bookingId, date, fromMinute, toMinute }: WeekQuestion
): Promise<Reply> {
	const movable = await loadMovable(db, clock, grant, { bookingId });
	if (!movable.ok) {
		const [title, text] = refusals[movable.reason];
		return { ok: false, title, text };
	}
	const { plan, visit } = movable;
	const { zone } = plan.problem.calendar;
	const monday = mondayOf(date);
	const days = Array.from({ length: 7 }, (_, index) => addDaysToDate(monday, index));
	const stretches = days.flatMap((day) => {
		const fromMs = atMinute(day, fromMinute, zone);
		const toMs = atMinute(day, toMinute, zone);
		return judgeWindow(movable, { fromMs, toMs });
	});
	return {
		ok: true,
		judged: { ...describeVisit(movable), isInvited: visit.invitedAtMs !== null, stretches }
	};
}

export type WeekQuestion = {
	bookingId: string;
	date: string;
	/** Minutes of the day that the grid shows. */
	fromMinute: number;
	toMinute: number;
};

/** The first instant of a local minute; where clocks jump over it, the start of the day after. */
function atMinute(date: string, minute: number, zone: string): number {
	if (minute >= 1440) return startOfLocalDate(addDaysToDate(date, 1), zone);
	const two = (value: number) => String(value).padStart(2, '0');
	const local = `${date}T${two(Math.floor(minute / 60))}:${two(minute % 60)}`;
	return localToInstants(local, zone)[0] ?? startOfLocalDate(date, zone);
}

function describeVisit({ plan, visit, chain }: MovableVisit) {
	const labelOf = (number: number) =>
		plan.problem.plan.visits.find((planned) => planned.number === number)?.label ?? '';
	return {
		bookingId: visit.bookingId,
		participantId: plan.participant.id,
		code: plan.participant.code,
		label: labelOf(visit.visitNumber),
		visitNumber: visit.visitNumber,
		personZone: plan.participant.zone,
		minutes: (visit.endMs - visit.startMs) / 60_000,
		planVersion: plan.planVersion,
		chain: chain.map(({ visitNumber, startMs, fixed }) => ({
			visitNumber,
			label: labelOf(visitNumber),
			startMs,
			isOver: fixed === true
		}))
	};
}

/** Judges one place, as after a drop: the rules it breaks, and up to three ways that break none. */
export async function judgeDrop(
	db: Queryable,
	clock: Clock,
	grant: Grant<'booking:read'>,
	{ bookingId, startMs, rigId }: { bookingId: string; startMs: number; rigId: string }
): Promise<PlaceReply | null> {
	const movable = await loadMovable(db, clock, grant, { bookingId });
	if (!movable.ok || !movable.plan.lab.rigs.some(({ id }) => id === rigId)) return null;
	const broken = judgePlace(movable, startMs, rigId);
	if (broken.length === 0) return { broken, ways: [] };
	const nowMs = clock.now() + noticeMs;
	const ways = findWays(movable, { nowMs, wantedStartMs: Math.max(startMs, nowMs) });
	return { broken, ways: ways.map((way) => tellWay(movable, way)) };
}

import { eq, sql } from 'drizzle-orm';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import { booking, type Answer } from '$lib/server/db/schema';
import { actorOf, recordEvent } from '$lib/server/record/record-event';
import type { PlacedVisit } from '$scheduler/booking/types.ts';
import { announceChange } from './announce-change';
import type { PersonPlan } from './load-person-plan';
import { isLive, type StudyVisit } from './load-visits';
import type { Placement } from './place-visits';

export type AppliedPlaces = {
	bookedCount: number;
	movedCount: number;
	/** Mails that were ordered: one a visit whose time or room changed after it was told. */
	mailCount: number;
};

type Input = { plan: PersonPlan; changed: readonly PlacedVisit[]; places: readonly Placement[] };
type Change = { visit: PlacedVisit; now: StudyVisit | null };

/** Writes the changed places, orders the mails they call for, and records what was done. */
export async function applyPlaces(
	tx: Queryable,
	clock: Clock,
	grant: Grant<'booking:change'>,
	input: Input
): Promise<AppliedPlaces> {
	const changes = listChanges(input);
	const booked = changes.filter(({ now }) => now === null);
	const moved = changes.filter(({ now }) => now !== null);
	const bookingIds: string[] = [];
	for (const { visit } of booked) {
		bookingIds.push(await insertVisit(tx, clock, grant, { plan: input.plan, visit }));
	}
	let mailCount = await announceChange(tx, clock, { kind: 'booked', bookingIds });
	for (const { visit, now } of moved) {
		if (now) mailCount += await moveVisit(tx, clock, { plan: input.plan, visit, now });
	}
	await record(tx, clock, grant, { plan: input.plan, booked, moved });
	return { bookedCount: booked.length, movedCount: moved.length, mailCount };
}

function listChanges({ plan, changed, places }: Input): Change[] {
	const touched = new Set(places.map(({ visitNumber }) => visitNumber));
	return changed
		.filter(({ visitNumber }) => touched.has(visitNumber))
		.map((visit) => ({ visit, now: findLive(plan, visit.visitNumber) }))
		.filter(({ visit, now }) => !now || !isSamePlace(visit, now));
}

function findLive({ visits }: PersonPlan, visitNumber: number): StudyVisit | null {
	return visits.find((one) => one.visitNumber === visitNumber && isLive(one)) ?? null;
}

function isSamePlace(visit: PlacedVisit, now: StudyVisit): boolean {
	return (
		visit.startMs === now.startMs && visit.rigId === now.rigId && visit.staffId === now.staffId
	);
}

type Where = { plan: PersonPlan; visit: PlacedVisit };

async function insertVisit(
	tx: Queryable,
	clock: Clock,
	grant: Grant<'booking:change'>,
	{ plan, visit }: Where
): Promise<string> {
	const at = new Date(clock.now());
	const [row] = await tx
		.insert(booking)
		.values({
			studyId: grant.studyId,
			participantId: plan.participant.id,
			visitNumber: visit.visitNumber,
			...placeColumns({ plan, visit }),
			createdAt: at,
			changedAt: at
		})
		.returning({ id: booking.id });
	if (!row) throw new Error('a booking was not stored');
	return row.id;
}

/** A visit that was told and is at another time or in another room gets one update of its event. */
async function moveVisit(
	tx: Queryable,
	clock: Clock,
	{ plan, visit, now }: Where & { now: StudyVisit }
): Promise<number> {
	const place = placeColumns({ plan, visit });
	const isNews =
		visit.startMs !== now.startMs || roomOf(plan, visit.rigId) !== roomOf(plan, now.rigId);
	const isTold = now.invitedAtMs !== null && isNews;
	const asked = now.answer === 'declined' || now.answer === 'asks-other-time';
	const at = new Date(clock.now());
	await tx
		.update(booking)
		.set({
			...place,
			changedAt: at,
			...(asked && isNews ? { requestSettledAt: at } : {}),
			...(isTold
				? { sequence: sql`${booking.sequence} + 1`, answer: 'none' as Answer, answeredAt: null }
				: {})
		})
		.where(eq(booking.id, now.bookingId));
	if (!isTold) return 0;
	const oldTime = { startMs: now.startMs, endMs: now.endMs };
	return announceChange(tx, clock, { kind: 'moved', bookingId: now.bookingId, oldTime });
}

function roomOf({ lab }: PersonPlan, rigId: string): string {
	const found = lab.rigs.find(({ id }) => id === rigId);
	if (!found) throw new RangeError('a visit requires a rig of the lab');
	return found.roomId;
}

function placeColumns({ plan, visit }: Where) {
	const planned = plan.problem.plan.visits.find(({ number }) => number === visit.visitNumber);
	if (!planned) throw new RangeError(`the plan has no visit ${visit.visitNumber}`);
	const minuteMs = 60_000;
	const endMs = visit.startMs + planned.minutes * minuteMs;
	return {
		rigId: visit.rigId,
		roomId: roomOf(plan, visit.rigId),
		staffId: visit.staffId,
		during: { startsAt: new Date(visit.startMs), endsAt: new Date(endMs) },
		occupied: {
			startsAt: new Date(visit.startMs - planned.setupMinutes * minuteMs),
			endsAt: new Date(endMs + planned.cleanupMinutes * minuteMs)
		}
	};
}

type Done = { plan: PersonPlan; booked: readonly Change[]; moved: readonly Change[] };

async function record(
	tx: Queryable,
	clock: Clock,
	grant: Grant<'booking:change'>,
	{ plan, booked, moved }: Done
): Promise<void> {
	const tell = ({ visit, now }: Change) => ({
		visitNumber: visit.visitNumber,
		startAt: new Date(visit.startMs).toISOString(),
		rigId: visit.rigId,
		...(now ? { fromAt: new Date(now.startMs).toISOString(), fromRigId: now.rigId } : {})
	});
	const about = { labId: grant.labId, studyId: grant.studyId, participantId: plan.participant.id };
	for (const [kind, changes] of [
		['visits-booked', booked],
		['visits-moved', moved]
	] as const) {
		if (changes.length === 0) continue;
		const body = { visits: changes.map(tell) };
		await recordEvent(tx, clock, actorOf(grant), { kind, item: 'booking', ...about, body });
	}
}

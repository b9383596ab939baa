import { eq } from 'drizzle-orm';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Transaction } from '$lib/server/db/client';
import { revokeBundlesOfVisit } from '$lib/server/bundles/revoke-bundles';
import { booking } from '$lib/server/db/schema';
import { actorOf, recordEvent } from '$lib/server/record/record-event';
import type { PlacedVisit } from '$scheduler/booking/types.ts';
import { announceChange } from './announce-change';
import type { MailSetting } from '$lib/server/invitations/mail-setting';
import type { PersonPlan } from './load-person-plan';
import { isLive, type StudyVisit } from './load-visits';
import type { Placement } from './place-visits';

export type AppliedPlaces = {
	bookedCount: number;
	movedCount: number;
	/** Mails that were ordered: one a visit whose time or room changed after it was told. */
	mailCount: number;
};

type Input = {
	plan: PersonPlan;
	changed: readonly PlacedVisit[];
	places: readonly Placement[];
	mail: MailSetting;
};
type Change = { visit: PlacedVisit; now: StudyVisit | null };

/** Writes the changed places, orders the mails they call for, and records what was done. */
export async function applyPlaces(
	tx: Transaction,
	clock: Clock,
	grant: Grant<'booking:change'>,
	input: Input
): Promise<AppliedPlaces> {
	const { plan, mail } = input;
	const changes = listChanges(input);
	const booked = changes.filter(({ now }) => now === null);
	const moved = changes.filter(({ now }) => now !== null);
	let mailCount = 0;
	for (const { visit } of booked) await insertVisit(tx, clock, grant, { plan, visit });
	if (booked.length > 0) {
		const participantId = plan.participant.id;
		mailCount += await announceChange(tx, clock, mail, { kind: 'booked', participantId });
	}
	for (const { visit, now } of moved) {
		if (!now) continue;
		await updateVisit(tx, clock, { plan, visit, now });
		const { bookingId } = now;
		mailCount += await announceChange(tx, clock, mail, { kind: 'moved', bookingId });
	}
	await record(tx, clock, grant, { plan, booked, moved });
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
	tx: Transaction,
	clock: Clock,
	grant: Grant<'booking:change'>,
	{ plan, visit }: Where
): Promise<void> {
	const at = new Date(clock.now());
	await tx.insert(booking).values({
		studyId: grant.studyId,
		participantId: plan.participant.id,
		visitNumber: visit.visitNumber,
		...placeColumns({ plan, visit }),
		createdAt: at,
		changedAt: at
	});
}

async function updateVisit(
	tx: Transaction,
	clock: Clock,
	{ plan, visit, now }: Where & { now: StudyVisit }
): Promise<void> {
	const at = new Date(clock.now());
	await revokeBundlesOfVisit(tx, at, now);
	await tx
		.update(booking)
		.set({ ...placeColumns({ plan, visit }), changedAt: at })
		.where(eq(booking.id, now.bookingId));
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
	tx: Transaction,
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

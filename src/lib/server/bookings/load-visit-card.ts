import type { ToldWay } from '$lib/bookings/told-way';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import { booking } from '$lib/server/db/schema';
import type { PeopleKeys } from '$lib/server/keys/people-keys';
import { loadParticipant } from '$lib/server/people/load-participants';
import { eq } from 'drizzle-orm';
import { findWays, loadMovable } from './judge-visit';
import { loadContent, loadPlanVersion } from './load-person-plan';
import { loadVisits, type StudyVisit } from './load-visits';
import { noticeMs } from './propose-chains';
import { hasOpenRequest } from './settle-request';
import { tellWay } from './tell-ways';
import { loadLabZone } from '$lib/server/waiting/chain-items';

/** One visit with what can be done about it. */
export type VisitCard = {
	visit: StudyVisit;
	label: string;
	code: string;
	personZone: string;
	labZone: string;
	nowMs: number;
	planVersion: number;
	/** The person declined or asks for another time; their words, when they left any. */
	request: { words: string | null } | null;
	mayMove: boolean;
	/** Missed, and without a new place yet. */
	isMissed: boolean;
	ways: ToldWay[];
	mayRecord: { attended: boolean; missed: boolean };
	mayCancel: boolean;
};

/** Loads a visit of one participant of the grant's study; null when it is not theirs. */
export async function loadVisitCard(
	db: Queryable,
	clock: Clock,
	grant: Grant<'booking:change'>,
	{ keys, participantId, bookingId }: { keys: PeopleKeys; participantId: string; bookingId: string }
): Promise<VisitCard | null> {
	const person = await loadParticipant(db, grant, participantId);
	if (!person || !/^[0-9a-f-]{36}$/i.test(bookingId)) return null;
	const [visit] = await loadVisits(db, grant, { bookingIds: [bookingId] });
	if (!visit || visit.participantId !== person.id) return null;
	const content = await loadContent(db, person.protocolVersionId);
	const nowMs = clock.now();
	const movable = await loadMovable(db, clock, grant, { bookingId });
	const isIn = person.withdrawnAtMs === null;
	const isOpen = isIn && visit.state !== 'cancelled';
	const ways = movable.ok ? findWays(movable, { nowMs: nowMs + noticeMs }) : [];
	return {
		visit,
		label: content.visits.find(({ number }) => number === visit.visitNumber)?.label ?? 'Visit',
		code: person.code,
		personZone: person.zone,
		labZone: await loadLabZone(db, grant.labId),
		nowMs,
		planVersion: await loadPlanVersion(db, grant.studyId),
		request: hasOpenRequest(visit) ? { words: await readNote(db, keys, visit) } : null,
		mayMove: movable.ok,
		isMissed: movable.ok && visit.state === 'no-show',
		ways: movable.ok ? ways.map((way) => tellWay(movable, way)) : [],
		mayRecord: {
			attended: isOpen && visit.state !== 'attended' && visit.occupiedFromMs <= nowMs,
			missed: isOpen && visit.state !== 'no-show' && visit.startMs <= nowMs
		},
		mayCancel: isIn && visit.state === 'booked' && visit.startMs > nowMs
	};
}

async function readNote(
	db: Queryable,
	keys: PeopleKeys,
	visit: StudyVisit
): Promise<string | null> {
	const [row] = await db
		.select({ note: booking.answerNote })
		.from(booking)
		.where(eq(booking.id, visit.bookingId));
	if (!row?.note) return null;
	const read = await keys.folder.readText(visit.participantId, row.note);
	return read.ok ? read.text : null;
}

import type { TimelinePlace } from '$lib/people/timeline';
import { describeAvailability } from '$lib/people/availability';
import { sortByUrgency, type WaitingItem } from '$lib/waiting/waiting-item';
import type { Grant } from '$lib/server/access/require-permission';
import { isLive, type StudyVisit } from '$lib/server/bookings/load-visits';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import { loadLabZone } from '$lib/server/waiting/chain-items';
import { loadCoordinatorItems } from '$lib/server/waiting/load-waiting';
import { loadMessages, type Message } from '$lib/server/waiting/load-messages';
import { loadConsents, type ConsentRecord, type StudyParticipant } from './load-participants';
import { loadPersonRecords, visitLabel, type PersonRecord } from './load-person-records';

export type CardVisit = StudyVisit & { label: string; mayMove: boolean; mayRecord: boolean };
export type PlannedVisit = { number: number; label: string; visit: CardVisit | null };

/** One person as the coordinator sees them: by code, without arm, decision or contact data. */
export type PersonCard = {
	person: StudyParticipant;
	labZone: string;
	nowMs: number;
	timeline: TimelinePlace;
	canCome: string;
	consentTextVersion: string;
	consents: ConsentRecord[];
	/** The protocol's visits in order, each with its live booking. */
	plan: PlannedVisit[];
	/** Cancelled and missed bookings. */
	earlier: CardVisit[];
	messages: Message[];
	items: WaitingItem[];
};

/** Everything about one participant of the grant's study; null when there is none with this id. */
export async function loadPersonCard(
	db: Queryable,
	clock: Clock,
	grant: Grant<'participant:list'>,
	participantId: string
): Promise<PersonCard | null> {
	if (!/^[0-9a-f-]{36}$/i.test(participantId)) return null;
	const records = await loadPersonRecords(db, grant, { participantId });
	const [record] = records;
	if (!record) return null;
	const { person, content, visits, timeline } = record;
	const nowMs = clock.now();
	const shaped = visits.map((visit) => shapeVisit(record, visit, nowMs));
	return {
		person,
		labZone: await loadLabZone(db, grant.labId),
		nowMs,
		timeline,
		canCome: describeAvailability(person.availability),
		consentTextVersion: content.consentTextVersion,
		consents: await loadConsents(db, grant, participantId),
		plan: content.visits.map(({ number, label }) => ({
			number,
			label,
			visit: shaped.find((one) => one.visitNumber === number && isLive(one)) ?? null
		})),
		earlier: shaped.filter((one) => !isLive(one)),
		messages: await loadMessages(db, grant, { participantId, limit: 50 }),
		items: sortByUrgency(await loadCoordinatorItems(db, clock, grant, records))
	};
}

function shapeVisit(
	{ person, content }: PersonRecord,
	visit: StudyVisit,
	nowMs: number
): CardVisit {
	const isIn = person.withdrawnAtMs === null;
	return {
		...visit,
		label: visitLabel(content, visit.visitNumber),
		mayMove: isIn && visit.state === 'booked' && visit.startMs > nowMs,
		mayRecord: isIn && visit.state !== 'cancelled' && visit.occupiedFromMs <= nowMs
	};
}

import type { PeopleList, PersonRow } from '$lib/people/people-list';
import { daysBetween } from '$lib/time/days-between';
import { localDateOf } from '$lib/time/wall-clock';
import { sortByUrgency, waitingWords, type WaitingItem } from '$lib/waiting/waiting-item';
import type { Grant } from '$lib/server/access/require-permission';
import { isLive } from '$lib/server/bookings/load-visits';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import { loadLabZone } from '$lib/server/waiting/chain-items';
import { loadCoordinatorItems } from '$lib/server/waiting/load-waiting';
import { loadPersonRecords, visitLabel, type PersonRecord } from './load-person-records';

/** Everybody of the study by code: where they stand, their next visit, and what waits. */
export async function loadPeopleList(
	db: Queryable,
	clock: Clock,
	grant: Grant<'participant:list'>
): Promise<PeopleList> {
	const records = await loadPersonRecords(db, grant);
	const items = sortByUrgency(await loadCoordinatorItems(db, clock, grant, records));
	const zone = await loadLabZone(db, grant.labId);
	const nowMs = clock.now();
	return { zone, nowMs, rows: records.map((record) => shapeRow(record, { items, zone, nowMs })) };
}

type RowContext = { items: readonly WaitingItem[]; zone: string; nowMs: number };

function shapeRow(record: PersonRecord, { items, zone, nowMs }: RowContext): PersonRow {
	const { person, content, timeline } = record;
	const first = items.find(({ participantId }) => participantId === person.id);
	const isIn = person.withdrawnAtMs === null;
	const version = person.consent?.textVersion ?? null;
	const isConsentOld = version !== null && version !== content.consentTextVersion;
	const hasOpenVisits = record.content.visits.some(
		({ number }) => !record.visits.some((one) => one.visitNumber === number && isLive(one))
	);
	return {
		id: person.id,
		code: person.code,
		timeline,
		nextVisit: isIn ? findNextVisit(record, nowMs) : null,
		consent: version,
		isConsentOld,
		waits: first
			? { words: waitingWords[first.kind], tone: first.tone, href: first.act?.href ?? '' }
			: null,
		consentToVisitDays: countDaysToVisit(record, zone),
		mayConsent: isIn && (version === null || isConsentOld),
		mayBook: isIn && person.consentedAtMs !== null && hasOpenVisits
	};
}

function findNextVisit({ visits, content }: PersonRecord, nowMs: number): PersonRow['nextVisit'] {
	const next = visits.find((visit) => isLive(visit) && visit.endMs > nowMs);
	if (!next) return null;
	return {
		bookingId: next.bookingId,
		label: visitLabel(content, next.visitNumber),
		startMs: next.startMs,
		rigName: next.rigName,
		isHere: next.state === 'attended',
		answer: next.answer,
		isInvited: next.invitedAtMs !== null
	};
}

/** Local days from the first consent to the first visit, booked or over; null without both. */
export function countDaysToVisit({ person, visits }: PersonRecord, zone: string): number | null {
	const first = visits.find(isLive);
	if (!first || person.consentedAtMs === null) return null;
	return daysBetween(localDateOf(person.consentedAtMs, zone), localDateOf(first.startMs, zone));
}

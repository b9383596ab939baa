import { inArray } from 'drizzle-orm';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import { placeOnTimeline, type TimelinePlace } from '$lib/people/timeline';
import type { Grant } from '$lib/server/access/require-permission';
import { loadVisits, type StudyVisit } from '$lib/server/bookings/load-visits';
import type { Queryable } from '$lib/server/db/client';
import { protocolVersion } from '$lib/server/db/schema';
import { loadParticipants, type StudyParticipant } from './load-participants';

/** A participant with the protocol version they follow and every booking they had. */
export type PersonRecord = {
	person: StudyParticipant;
	content: ProtocolContent;
	visits: StudyVisit[];
	timeline: TimelinePlace;
};

/** Everybody of the study by code, or one person. Reads neither arm, decision nor contact data. */
export async function loadPersonRecords(
	db: Queryable,
	grant: Grant<'participant:list' | 'today:read'>,
	only?: { participantId: string }
): Promise<PersonRecord[]> {
	const people = await loadParticipants(db, grant, only);
	const contents = await loadContents(
		db,
		people.map(({ protocolVersionId }) => protocolVersionId)
	);
	const visits = groupByPerson(await loadVisits(db, grant, only ?? {}));
	return people.map((person) => {
		const content = contents.get(person.protocolVersionId);
		if (!content) throw new Error('a participant belongs to a protocol version');
		const own = visits.get(person.id) ?? [];
		const { visits: plan, arms } = content;
		const timeline = placeOnTimeline({ person, plan, armCount: arms.length, visits: own });
		return { person, content, visits: own, timeline };
	});
}

async function loadContents(db: Queryable, ids: readonly string[]) {
	const wanted = [...new Set(ids)];
	if (wanted.length === 0) return new Map<string, ProtocolContent>();
	const rows = await db
		.select({ id: protocolVersion.id, content: protocolVersion.content })
		.from(protocolVersion)
		.where(inArray(protocolVersion.id, wanted));
	return new Map(rows.map(({ id, content }) => [id, content]));
}

function groupByPerson(visits: readonly StudyVisit[]): Map<string, StudyVisit[]> {
	const found = new Map<string, StudyVisit[]>();
	for (const visit of visits) {
		const own = found.get(visit.participantId);
		if (own) own.push(visit);
		else found.set(visit.participantId, [visit]);
	}
	return found;
}

/** What a visit is called in the protocol: 'Day 3'. */
export function visitLabel({ visits }: ProtocolContent, visitNumber: number): string {
	return visits.find(({ number }) => number === visitNumber)?.label ?? `Visit ${visitNumber}`;
}

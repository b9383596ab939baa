import { and, eq, inArray, ne } from 'drizzle-orm';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import { block, booking, lab, participant, protocolVersion, study } from '$lib/server/db/schema';
import { taskRecordSchema } from '$scheduler/tasks/task-record';
import { localDateOf } from '$lib/time/wall-clock';
import type { Roster, RosterVisit } from './roster';

export type StudyRoster = Roster & { idByCode: Map<string, string> };

/** Who is expected on which visit of a study: codes, booked days, planned and stored blocks. No arms. */
export async function loadRoster(
	db: Queryable,
	clock: Clock,
	studyId: string
): Promise<StudyRoster> {
	const people = await db
		.select({ id: participant.id, code: participant.code, content: protocolVersion.content })
		.from(participant)
		.innerJoin(protocolVersion, eq(protocolVersion.id, participant.protocolVersionId))
		.where(and(eq(participant.studyId, studyId), ne(participant.state, 'withdrawn')));
	const zone = await loadZone(db, studyId);
	const visitsOf = await loadBookings(db, { clock, studyId, zone });
	const storedOf = await loadStored(db, studyId);
	const roster: StudyRoster = { people: new Map(), variables: [], idByCode: new Map() };
	for (const { id, code, content } of people) {
		roster.idByCode.set(code, id);
		if (roster.variables.length === 0)
			roster.variables = taskRecordSchema.parse(content.task).variables;
		roster.people.set(
			code,
			new Map(
				content.visits.map((visit) => {
					const key = `${id} ${visit.number}`;
					const known = visitsOf.get(key) ?? { bookedOn: null, hasStarted: false };
					const found: RosterVisit = {
						...known,
						blocks: visit.blocks,
						stored: storedOf.get(key) ?? []
					};
					return [visit.number, found];
				})
			)
		);
	}
	return roster;
}

async function loadZone(db: Queryable, studyId: string): Promise<string> {
	const [row] = await db
		.select({ zone: lab.zone })
		.from(study)
		.innerJoin(lab, eq(lab.id, study.labId))
		.where(eq(study.id, studyId));
	return row?.zone ?? 'UTC';
}

type Place = { clock: Clock; studyId: string; zone: string };

async function loadBookings(db: Queryable, { clock, studyId, zone }: Place) {
	const rows = await db
		.select({
			participantId: booking.participantId,
			visitNumber: booking.visitNumber,
			during: booking.during,
			occupied: booking.occupied
		})
		.from(booking)
		.where(and(eq(booking.studyId, studyId), inArray(booking.state, ['booked', 'attended'])));
	return new Map(
		rows.map((row) => {
			const bookedOn = localDateOf(row.during.startsAt.getTime(), zone);
			return [
				`${row.participantId} ${row.visitNumber}`,
				{ bookedOn, hasStarted: row.occupied.startsAt.getTime() <= clock.now() }
			];
		})
	);
}

async function loadStored(db: Queryable, studyId: string): Promise<Map<string, number[]>> {
	const rows = await db
		.select({
			participantId: block.participantId,
			visitNumber: block.visitNumber,
			blockNumber: block.blockNumber
		})
		.from(block)
		.where(eq(block.studyId, studyId));
	const stored = new Map<string, number[]>();
	for (const row of rows) {
		const key = `${row.participantId} ${row.visitNumber}`;
		stored.set(key, [...(stored.get(key) ?? []), row.blockNumber]);
	}
	return stored;
}

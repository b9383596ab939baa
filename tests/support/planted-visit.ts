import { randomUUID } from 'node:crypto';
import { eq } from 'drizzle-orm';
import type { Database } from '$lib/server/db/client';
import { booking, contact, participant, rig } from '$lib/server/db/schema';
import type { PeopleKeys } from '$lib/server/keys/people-keys';
import { plantedNowMs, type PlantedStudy } from './planted-study';

const MINUTE_MS = 60_000;
let serial = 0;

/** A consented participant in New York, with contact data under their own key. */
export async function plantParticipant(
	db: Database,
	keys: PeopleKeys,
	home: PlantedStudy,
	change: Partial<typeof participant.$inferInsert> = {}
) {
	const participantId = randomUUID();
	const number = ++serial;
	const email = `anna.${number}@people.example`;
	await db.insert(participant).values({
		id: participantId,
		studyId: home.studyId,
		protocolVersionId: home.versionId,
		number,
		code: `TW-${String(number).padStart(3, '0')}`,
		state: 'consented',
		zone: 'America/New_York',
		enrolledAt: new Date(plantedNowMs),
		...change
	});
	await keys.folder.createKey(participantId);
	const details = JSON.stringify({ name: 'Anna Sample', email, phone: '' });
	await db.insert(contact).values({
		participantId,
		studyId: home.studyId,
		sealed: await keys.folder.encrypt(participantId, details),
		emailIndex: Buffer.from(keys.indexEmail(email), 'hex'),
		updatedAt: new Date(plantedNowMs)
	});
	return { participantId, email };
}

/** A booked visit of 45 minutes with quarter hours before and after. */
export async function plantBooking(
	db: Database,
	home: PlantedStudy,
	visit: { participantId: string; visitNumber: number; startMs: number; rigIndex?: 0 | 1 }
): Promise<string> {
	const id = randomUUID();
	const rigId = home.rigIds[visit.rigIndex ?? 0];
	const [found] = await db.select({ roomId: rig.roomId }).from(rig).where(eq(rig.id, rigId));
	if (!found) throw new Error('no such rig');
	await db.insert(booking).values({
		id,
		studyId: home.studyId,
		participantId: visit.participantId,
		visitNumber: visit.visitNumber,
		rigId,
		roomId: found.roomId,
		staffId: home.staffIds[visit.rigIndex ?? 0],
		...rangesOf(visit.startMs),
		createdAt: new Date(plantedNowMs),
		changedAt: new Date(plantedNowMs)
	});
	return id;
}

/** Moves a booking's times, as a change of plan does before it tells the participant. */
export async function shiftBooking(
	db: Pick<Database, 'update'>,
	bookingId: string,
	startMs: number
): Promise<void> {
	await db.update(booking).set(rangesOf(startMs)).where(eq(booking.id, bookingId));
}

function rangesOf(startMs: number) {
	const at = (minutes: number) => new Date(startMs + minutes * MINUTE_MS);
	return {
		during: { startsAt: at(0), endsAt: at(45) },
		occupied: { startsAt: at(-15), endsAt: at(60) }
	};
}

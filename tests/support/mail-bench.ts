import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, beforeEach } from 'vitest';
import { openDatabase, type DatabaseHandle, type Transaction } from '$lib/server/db/client';
import { booking, outbox, participant } from '$lib/server/db/schema';
import { enqueueInvitations } from '$lib/server/invitations/enqueue-invitations';
import { enqueueCancellation, enqueueMove } from '$lib/server/invitations/enqueue-visit-change';
import type { MailSetting } from '$lib/server/invitations/mail-setting';
import { sendDueMail } from '$lib/server/invitations/send-due-mail';
import type { PeopleKeys } from '$lib/server/keys/people-keys';
import { createDatabase, type TestDatabase } from './create-database';
import {
	createTestClock,
	createTestKeys,
	plantedNowMs,
	plantLab,
	plantStudy,
	type PlantedStudy
} from './planted-study';
import { plantBooking, plantParticipant, shiftBooking } from './planted-visit';
import { createRecordingSender } from './recording-sender';

export const HOUR_MS = 3_600_000;
export const MINUTE_MS = 60_000;
export const baselineMs = Date.parse('2027-03-10T10:00Z');
export const dayOneMs = Date.parse('2027-03-15T14:00Z');

type Bench = {
	owner: DatabaseHandle;
	app: DatabaseHandle;
	keys: PeopleKeys;
	setting: MailSetting;
	home: PlantedStudy;
	person: { participantId: string; email: string };
	/** Bookings of the baseline visit and of the first practice day. */
	baseline: string;
	dayOne: string;
	clock: ReturnType<typeof createTestClock>;
	post: ReturnType<typeof createRecordingSender>;
};

/**
 * A database, and before each test a study with one participant who has two visits booked, a clock
 * that stands still and a mail server that answers as told.
 */
export function useMailBench() {
	const bench = {} as Bench;
	let database: TestDatabase;
	beforeAll(async () => {
		database = await createDatabase();
		bench.owner = openDatabase(database.ownerUrl);
		bench.app = openDatabase(database.appUrl);
		bench.keys = await createTestKeys();
		bench.setting = {
			keys: bench.keys.folder,
			origin: 'https://ovalry.example',
			fromAddress: 'lab@ovalry.example'
		};
	});
	afterAll(async () => {
		await Promise.all([bench.owner.end(), bench.app.end()]);
		await database.drop();
	});
	beforeEach(() => plantBench(bench));
	return { bench, ...actsOn(bench) };
}

async function plantBench(bench: Bench): Promise<void> {
	const { db } = bench.owner;
	await db.delete(outbox);
	bench.home = await plantStudy(db, await plantLab(db));
	bench.person = await plantParticipant(db, bench.keys, bench.home);
	const { participantId } = bench.person;
	const [first, second] = [
		{ participantId, visitNumber: 1, startMs: baselineMs },
		{ participantId, visitNumber: 2, startMs: dayOneMs }
	];
	bench.baseline = await plantBooking(db, bench.home, first);
	bench.dayOne = await plantBooking(db, bench.home, second);
	bench.clock = createTestClock(plantedNowMs);
	bench.post = createRecordingSender();
}

function actsOn(bench: Bench) {
	const inTransaction = <T>(work: (tx: Transaction) => Promise<T>) =>
		bench.app.db.transaction(work);
	return {
		inTransaction,
		run: () =>
			sendDueMail(bench.app.db, bench.clock, {
				sender: bench.post.sender,
				keys: bench.keys.folder
			}),
		invite: () =>
			inTransaction((tx) =>
				enqueueInvitations(tx, bench.clock, bench.setting, bench.person.participantId)
			),
		move: (bookingId: string, startMs: number) =>
			inTransaction(async (tx) => {
				await shiftBooking(tx, bookingId, startMs);
				return enqueueMove(tx, bench.clock, bench.setting, bookingId);
			}),
		cancel: (bookingId: string) =>
			inTransaction(async (tx) => {
				await tx.update(booking).set({ state: 'cancelled' }).where(eq(booking.id, bookingId));
				return enqueueCancellation(tx, bench.clock, bench.setting, bookingId);
			}),
		allocate: (atMs: number) =>
			bench.owner.db
				.update(participant)
				.set({ state: 'allocated', allocatedAt: new Date(atMs) })
				.where(eq(participant.id, bench.person.participantId)),
		/** Kind, sequence and state of every mail, oldest first. */
		states: async () => {
			const rows = await bench.owner.db
				.select()
				.from(outbox)
				.orderBy(outbox.createdAt, outbox.sequence);
			return rows.map((row) => `${row.kind} ${row.sequence} ${row.state}`);
		},
		later: (ms: number) => bench.clock.set(bench.clock.now() + ms)
	};
}

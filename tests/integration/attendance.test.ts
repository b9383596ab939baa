import { eq } from 'drizzle-orm';
import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { recordAttendance } from '$lib/server/attendance/record-attendance';
import { openDatabase, type DatabaseHandle } from '$lib/server/db/client';
import { booking, consent, ethicsApproval, participant, signOff } from '$lib/server/db/schema';
import { loadWaiting } from '$lib/server/waiting/load-waiting';
import { createDatabase, type TestDatabase } from '../support/create-database';
import {
	createTestClock,
	plantLab,
	plantMember,
	plantStudy,
	plantedContent,
	plantedNowMs,
	type PlantedStudy
} from '../support/planted-study';

let database: TestDatabase;
let app: DatabaseHandle;
let owner: DatabaseHandle;
let home: PlantedStudy;
let coordinator: Awaited<ReturnType<typeof plantMember>>;
let clock: ReturnType<typeof createTestClock>;
const hourMs = 3_600_000;

beforeAll(async () => {
	database = await createDatabase();
	app = openDatabase(database.appUrl);
	owner = openDatabase(database.ownerUrl);
});

beforeEach(async () => {
	clock = createTestClock();
	home = await plantStudy(owner.db, await plantLab(owner.db));
	coordinator = await plantMember(owner.db, home, 'coordinator');
});

afterAll(async () => {
	await app.end();
	await owner.end();
	await database.drop();
});

async function plantParticipant(number: number, { hasConsent = true } = {}) {
	const id = randomUUID();
	await owner.db.insert(participant).values({
		id,
		studyId: home.studyId,
		protocolVersionId: home.versionId,
		number,
		code: `TW-00${number}`,
		state: hasConsent ? 'consented' : 'lead',
		zone: 'Europe/Lisbon',
		enrolledAt: new Date(plantedNowMs),
		consentedAt: hasConsent ? new Date(plantedNowMs) : null
	});
	if (!hasConsent) return id;
	const signed = { participantId: id, textVersion: plantedContent.consentTextVersion };
	const at = new Date(plantedNowMs);
	await owner.db
		.insert(consent)
		.values({ ...signed, signedAt: at, recordedBy: home.ownerId, recordedAt: at });
	return id;
}

async function plantVisit(
	participantId: string,
	visitNumber: number,
	startMs: number,
	more: Partial<typeof booking.$inferInsert> = {}
) {
	const { rooms } = await roomOf(home.rigIds[0]);
	const [row] = await owner.db
		.insert(booking)
		.values({
			studyId: home.studyId,
			participantId,
			visitNumber,
			rigId: home.rigIds[0],
			roomId: rooms,
			staffId: home.staffIds[0],
			during: { startsAt: new Date(startMs), endsAt: new Date(startMs + 45 * 60_000) },
			occupied: {
				startsAt: new Date(startMs - 15 * 60_000),
				endsAt: new Date(startMs + 60 * 60_000)
			},
			createdAt: new Date(plantedNowMs),
			changedAt: new Date(plantedNowMs),
			...more
		})
		.returning({ id: booking.id });
	return row?.id ?? '';
}

async function roomOf(rigId: string) {
	const found = await owner.db.query.rig.findFirst({ where: (table) => eq(table.id, rigId) });
	return { rooms: found?.roomId ?? '' };
}

const tuesdayAt = (hour: number) => Date.UTC(2027, 2, 2, hour);

describe('recordAttendance', () => {
	const record = async (bookingId: string, outcome: 'attended' | 'no-show') =>
		recordAttendance(app.db, clock, await coordinator.grantFor('attendance:record'), {
			bookingId,
			outcome
		});

	it('waits for the visit, and can be corrected', async () => {
		const bookingId = await plantVisit(await plantParticipant(1), 1, tuesdayAt(10));
		expect(await record(bookingId, 'no-show')).toEqual({ ok: false, reason: 'not-yet' });
		clock.set(tuesdayAt(10) - 10 * 60_000);
		expect(await record(bookingId, 'no-show')).toEqual({ ok: false, reason: 'not-yet' });
		expect(await record(bookingId, 'attended')).toEqual({ ok: true, from: 'booked' });
		clock.set(tuesdayAt(10));
		expect(await record(bookingId, 'no-show')).toEqual({ ok: true, from: 'attended' });
		expect(await record(bookingId, 'attended')).toEqual({ ok: true, from: 'no-show' });
	});

	it('of a missed visit frees the place, which cannot be taken back once somebody has it', async () => {
		const missed = await plantVisit(await plantParticipant(1), 1, tuesdayAt(10));
		clock.set(tuesdayAt(10));
		await record(missed, 'no-show');
		await plantVisit(await plantParticipant(2), 1, tuesdayAt(10));
		expect(await record(missed, 'attended')).toMatchObject({
			ok: false,
			reason: 'taken',
			clash: { sentence: expect.stringMatching(/ is taken on Tue 2 March 2027, 09:45 to 11:00/) }
		});
	});

	it('knows no visit of another study', async () => {
		const bookingId = await plantVisit(await plantParticipant(1), 1, tuesdayAt(10));
		const other = await plantStudy(owner.db, home, { codePrefix: 'OT' });
		const stranger = await plantMember(owner.db, other, 'coordinator');
		const outcome = await recordAttendance(
			app.db,
			clock,
			await stranger.grantFor('attendance:record'),
			{ bookingId, outcome: 'attended' }
		);
		expect(outcome).toEqual({ ok: false, reason: 'not-found' });
	});
});

describe('loadWaiting', () => {
	const waiting = async (member = coordinator) =>
		loadWaiting(app.db, clock, await member.grantFor('today:read'));
	const kinds = async (member = coordinator) =>
		(await waiting(member)).map(({ kind, title }) => `${kind}: ${title}`);

	it('tells the coordinator what waits, most urgent first, and drops it when it is done', async () => {
		const [first, second] = [await plantParticipant(1), await plantParticipant(2)];
		await plantParticipant(3, { hasConsent: false });
		const asked = { answer: 'asks-other-time', answeredAt: new Date(plantedNowMs) } as const;
		const missed = await plantVisit(first, 1, tuesdayAt(9));
		await plantVisit(second, 1, tuesdayAt(13), asked);
		clock.set(tuesdayAt(10));
		expect((await kinds()).filter((kind) => !kind.startsWith('book:'))).toEqual([
			'asks-other-time: TW-002 asks for another time',
			'attendance: Did TW-001 come?',
			'consent: TW-003 has no consent on record'
		]);
		await recordAttendance(app.db, clock, await coordinator.grantFor('attendance:record'), {
			bookingId: missed,
			outcome: 'no-show'
		});
		expect(await kinds()).toContain('missed: TW-001 did not come at 09:00');
		await plantVisit(first, 1, tuesdayAt(15));
		expect((await kinds()).some((kind) => kind.startsWith('missed'))).toBe(false);
	});

	it('tells of a chain that breaks a rule since an earliest start was given', async () => {
		const id = await plantParticipant(1);
		await plantVisit(id, 1, tuesdayAt(9), { state: 'attended' });
		await plantVisit(id, 2, tuesdayAt(9) + 72 * hourMs);
		clock.set(tuesdayAt(12));
		expect((await kinds()).some((kind) => kind.startsWith('chain-broken'))).toBe(false);
		const earliestStartAt = new Date(tuesdayAt(9) + 96 * hourMs);
		await owner.db.update(participant).set({ earliestStartAt }).where(eq(participant.id, id));
		const item = (await waiting()).find(({ kind }) => kind === 'chain-broken');
		expect(item?.what).toMatch(/^Earliest start\. Day 1 would start before/);
	});

	it('names a missing gate to everybody and gives the act to whose step it is', async () => {
		await owner.db.insert(signOff).values({
			studyId: home.studyId,
			protocolHash: home.hash,
			verdict: 'sent-back',
			assumptions: {},
			personId: home.ownerId,
			at: new Date(plantedNowMs + 1)
		});
		await owner.db
			.update(ethicsApproval)
			.set({ revokedAt: new Date(plantedNowMs) })
			.where(eq(ethicsApproval.studyId, home.studyId));
		const statistician = await plantMember(owner.db, home, 'statistician');
		const acts = async (member: typeof coordinator) =>
			(await waiting(member))
				.filter(({ kind }) => kind === 'gate')
				.map(({ key, act }) => [key, act?.label ?? null]);
		expect(await acts(statistician)).toEqual(
			expect.arrayContaining([
				['gate not-signed', 'Open the power report'],
				['gate no-approval', null]
			])
		);
		expect(await acts(coordinator)).toEqual([
			['gate no-approval', null],
			['gate not-signed', null]
		]);
	});

	it('tells those who do not book nothing about people', async () => {
		await plantParticipant(1);
		for (const role of ['investigator', 'statistician', 'monitor', 'operator'] as const) {
			const member = await plantMember(owner.db, home, role);
			expect(JSON.stringify(await waiting(member))).not.toContain('TW-00');
		}
	});
});

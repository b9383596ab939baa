import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { emptyCells } from '$lib/people/enrolment-columns';
import { isInView } from '$lib/people/people-list';
import { recordAttendance } from '$lib/server/attendance/record-attendance';
import { bookEarliest } from '$lib/server/bookings/book-earliest';
import { judgeDrop, judgeWeek } from '$lib/server/bookings/judge-week';
import { findWays, loadMovable } from '$lib/server/bookings/judge-visit';
import { loadPlanVersion } from '$lib/server/bookings/load-person-plan';
import { loadVisits } from '$lib/server/bookings/load-visits';
import { loadWeek } from '$lib/server/bookings/load-week';
import { findHelps, noticeMs, proposeChains } from '$lib/server/bookings/propose-chains';
import { savePlan } from '$lib/server/bookings/save-plan';
import { tellObstacle } from '$lib/server/bookings/tell-proposals';
import { tellWay } from '$lib/server/bookings/tell-ways';
import { openDatabase, type DatabaseHandle } from '$lib/server/db/client';
import { participant } from '$lib/server/db/schema';
import type { MailSetting } from '$lib/server/invitations/mail-setting';
import type { PeopleKeys } from '$lib/server/keys/people-keys';
import { enrolPeople } from '$lib/server/people/enrol-people';
import { loadParticipants } from '$lib/server/people/load-participants';
import { loadPeopleList } from '$lib/server/people/load-people-list';
import { recordConsent } from '$lib/server/people/record-consent';
import { loadToday } from '$lib/server/waiting/load-today';
import { createDatabase, type TestDatabase } from '../support/create-database';
import {
	createTestClock,
	createTestKeys,
	plantLab,
	plantMember,
	plantStudy,
	type PlantedStudy
} from '../support/planted-study';

let database: TestDatabase;
let app: DatabaseHandle;
let owner: DatabaseHandle;
let keys: PeopleKeys;
let mail: MailSetting;
let home: PlantedStudy;
let coordinator: Awaited<ReturnType<typeof plantMember>>;
let clock: ReturnType<typeof createTestClock>;
type Member = typeof coordinator;

beforeAll(async () => {
	database = await createDatabase();
	app = openDatabase(database.appUrl);
	owner = openDatabase(database.ownerUrl);
	keys = await createTestKeys();
	mail = { keys: keys.folder, origin: 'http://ovalry.example', fromAddress: 'lab@lab.example' };
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

async function enrolAndBook(count: number, member: Member = coordinator) {
	const rows = Array.from({ length: count }, (_, index) => ({
		line: index + 1,
		cells: { ...emptyCells, name: `Person ${index}`, email: `person${index}@mail.example` }
	}));
	await enrolPeople(app.db, clock, await member.grantFor('participant:enrol'), { keys, rows });
	const people = await loadParticipants(app.db, await member.grantFor('participant:list'));
	const participantIds = people.map(({ id }) => id);
	await recordConsent(app.db, clock, await member.grantFor('consent:record'), {
		participantIds,
		textVersion: 'v3',
		signedOn: '2027-03-01'
	});
	const change = await member.grantFor('booking:change');
	const results = await bookEarliest(app.db, clock, change, { participantIds, mail });
	return { participantIds, results };
}

async function visitsOf(participantId: string) {
	return loadVisits(app.db, await coordinator.grantFor('booking:read'), { participantId });
}

describe('booking the earliest places of several people', () => {
	it('books all of them side by side, one mail each about the first visit', async () => {
		const { results } = await enrolAndBook(6);
		expect(results.map(({ code, ok }) => [code, ok])).toEqual(
			[1, 2, 3, 4, 5, 6].map((number) => [`TW-00${number}`, true])
		);
		const list = await loadPeopleList(
			app.db,
			clock,
			await coordinator.grantFor('participant:list')
		);
		expect(list.rows.map(({ timeline }) => timeline.words)).toEqual(
			Array.from({ length: 6 }, () => 'baseline booked')
		);
		expect(list.rows.every((row) => isInView(row, 'no-answer', list.nowMs))).toBe(true);
	});

	it('names the visit without a place and what would open one', async () => {
		const { participantIds } = await enrolAndBook(0);
		expect(participantIds).toEqual([]);
		await enrolPeople(app.db, clock, await coordinator.grantFor('participant:enrol'), {
			keys,
			rows: [
				{
					line: 1,
					cells: { ...emptyCells, name: 'Sun', email: 's@mail.example', availability: 'Sun 9-12' }
				}
			]
		});
		const [person] = await owner.db
			.update(participant)
			.set({ consentedAt: new Date(clock.now()) })
			.where(eq(participant.studyId, home.studyId))
			.returning({ id: participant.id });
		const grant = await coordinator.grantFor('booking:change');
		const found = await proposeChains(app.db, clock, grant, { participantId: person?.id ?? '' });
		if (found.ok || found.reason !== 'no-chain') throw new Error('a chain was found');
		const told = tellObstacle(found.plan, {
			...found,
			helps: findHelps(found.plan, clock.now())
		});
		expect(told[0]).toBe('Baseline finds no place in any chain that keeps every rule.');
		expect(told[2]).toBe('Each of these by itself would open one: wider hours of this person.');
	});
});

describe('the week', () => {
	it('shows another study’s visits as taken time, without a word about them', async () => {
		const other = await plantStudy(owner.db, home, { codePrefix: 'OT' });
		const colleague = await plantMember(owner.db, other, 'coordinator');
		await enrolAndBook(1, colleague);
		await enrolAndBook(1);
		const grant = await coordinator.grantFor('booking:read');
		const week = await loadWeek(app.db, clock, grant, {});
		const [own, others] = [
			week.visits.filter(({ code }) => code !== null),
			week.visits.filter(({ code }) => code === null)
		];
		expect(own.map(({ code }) => code)).toContain('TW-001');
		expect(others.length).toBeGreaterThan(0);
		expect(JSON.stringify(week)).not.toContain('OT-');
		for (const visit of others) {
			expect(visit).toMatchObject({
				participantId: null,
				label: '',
				staffName: '',
				mayMove: false
			});
		}
	});

	it('judges a visit for the shown hours and answers a drop with ways that can be saved', async () => {
		const { participantIds } = await enrolAndBook(1);
		const day2 = (await visitsOf(participantIds[0] ?? ''))[2];
		if (!day2) throw new Error('nothing booked');
		const { bookingId, rigId } = day2;
		const grant = await coordinator.grantFor('booking:change');
		const read = await coordinator.grantFor('booking:read');
		const reply = await judgeWeek(app.db, clock, read, {
			bookingId,
			date: '2027-03-08',
			fromMinute: 8 * 60,
			toMinute: 18 * 60
		});
		if (!reply.ok) throw new Error(reply.title);
		const refusals = new Set(reply.judged.stretches.map(({ refusedBy }) => refusedBy));
		expect(refusals.has(null)).toBe(true);
		expect([...refusals]).toContain('gap 20–28 h');

		const startMs = day2.startMs + 7 * 3_600_000;
		const dropped = await judgeDrop(app.db, clock, read, { bookingId, startMs, rigId });
		expect(dropped?.broken.map(({ rule }) => rule)).toContain('gap-too-long');
		const [way] = dropped?.ways ?? [];
		if (!way) throw new Error('no way was found');
		const planVersion = await loadPlanVersion(app.db, home.studyId);
		const saved = await savePlan(app.db, clock, grant, {
			participantId: participantIds[0] ?? '',
			places: way.places,
			planVersion,
			mail
		});
		expect(saved).toMatchObject({ ok: true, movedCount: way.movedCount, mailCount: way.mailCount });
	});
});

describe('a person who came to every visit', () => {
	it('has completed, until the last visit turns out to have been missed', async () => {
		const { participantIds } = await enrolAndBook(1);
		const [participantId = ''] = participantIds;
		await owner.db
			.update(participant)
			.set({ state: 'allocated', allocatedAt: new Date(clock.now()) })
			.where(eq(participant.id, participantId));
		const attendance = await coordinator.grantFor('attendance:record');
		const visits = await visitsOf(participantId);
		for (const { bookingId, startMs } of visits) {
			clock.set(startMs + 60_000);
			await recordAttendance(app.db, clock, attendance, { bookingId, outcome: 'attended' });
		}
		const list = await coordinator.grantFor('participant:list');
		const state = async () => (await loadParticipants(app.db, list))[0]?.state;
		expect(await state()).toBe('completed');
		const bookingId = visits.at(-1)?.bookingId ?? '';
		await recordAttendance(app.db, clock, attendance, { bookingId, outcome: 'no-show' });
		expect(await state()).toBe('allocated');
	});
});

describe('a missed visit', () => {
	it('says so when no place keeps every rule', async () => {
		const { participantIds } = await enrolAndBook(1);
		const visits = await visitsOf(participantIds[0] ?? '');
		const attendance = await coordinator.grantFor('attendance:record');
		for (const { bookingId, startMs, visitNumber } of visits.slice(0, 3)) {
			clock.set(startMs + 60_000);
			const outcome = visitNumber === 3 ? 'no-show' : 'attended';
			await recordAttendance(app.db, clock, attendance, { bookingId, outcome });
		}
		clock.set((visits[2]?.startMs ?? 0) + 90 * 3_600_000);
		const today = await loadToday(app.db, clock, await coordinator.grantFor('today:read'));
		const item = today.items.find(({ kind }) => kind === 'missed');
		expect(item?.what).toMatch(/No place in twelve weeks keeps every rule\.$/);
	});

	it('is offered a place on the first page and made up for there', async () => {
		const { participantIds } = await enrolAndBook(1);
		const [participantId = ''] = participantIds;
		const visits = await visitsOf(participantId);
		const attendance = await coordinator.grantFor('attendance:record');
		for (const { bookingId, startMs, visitNumber } of visits) {
			clock.set(startMs + 60_000);
			const outcome = visitNumber === 5 ? 'no-show' : 'attended';
			await recordAttendance(app.db, clock, attendance, { bookingId, outcome });
		}
		const today = await loadToday(app.db, clock, await coordinator.grantFor('today:read'));
		const item = today.items.find(({ kind }) => kind === 'missed');
		expect(item?.act?.label).toMatch(/^Offer /);
		const missed = visits[4];
		const change = await coordinator.grantFor('booking:change');
		const movable = await loadMovable(app.db, clock, change, {
			bookingId: missed?.bookingId ?? ''
		});
		if (!movable.ok) throw new Error(movable.reason);
		const [first] = findWays(movable, { nowMs: clock.now() + noticeMs });
		if (!first) throw new Error('no way was found');
		const { places } = tellWay(movable, first);
		const saved = await savePlan(app.db, clock, change, {
			participantId,
			places,
			planVersion: movable.plan.planVersion,
			mail
		});
		expect(saved).toMatchObject({ ok: true, bookedCount: 1 });
		const after = await visitsOf(participantId);
		expect(after.filter(({ visitNumber }) => visitNumber === 5).map(({ state }) => state)).toEqual([
			'no-show',
			'booked'
		]);
	});
});

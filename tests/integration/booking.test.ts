import { and, asc, eq, sql } from 'drizzle-orm';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { emptyCells } from '$lib/people/enrolment-columns';
import type { MailSetting } from '$lib/server/invitations/mail-setting';
import { cancelVisit } from '$lib/server/bookings/cancel-visit';
import { judgeWindow, loadMovable } from '$lib/server/bookings/judge-visit';
import { loadPlanVersion } from '$lib/server/bookings/load-person-plan';
import { loadVisits } from '$lib/server/bookings/load-visits';
import { proposeChains } from '$lib/server/bookings/propose-chains';
import { savePlan } from '$lib/server/bookings/save-plan';
import { settleRequest } from '$lib/server/bookings/settle-request';
import { openDatabase, type DatabaseHandle } from '$lib/server/db/client';
import { booking, outbox, participant, recordEvent, studyPause } from '$lib/server/db/schema';
import type { PeopleKeys } from '$lib/server/keys/people-keys';
import { enrolPeople } from '$lib/server/people/enrol-people';
import { loadParticipants } from '$lib/server/people/load-participants';
import { recordConsent } from '$lib/server/people/record-consent';
import { withdrawPerson } from '$lib/server/people/withdraw-person';
import { createDatabase, type TestDatabase } from '../support/create-database';
import {
	createTestClock,
	createTestKeys,
	plantLab,
	plantMember,
	plantStudy,
	plantedNowMs,
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
const hourMs = 3_600_000;

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

type Member = typeof coordinator;

/** Enrols and takes the consent of `count` people; answers their ids. */
async function enrol(count: number, member: Member = coordinator): Promise<string[]> {
	const rows = Array.from({ length: count }, (_, index) => ({
		line: index + 1,
		cells: { ...emptyCells, name: `Person ${index}`, email: `person${index}@mail.example` }
	}));
	await enrolPeople(app.db, clock, await member.grantFor('participant:enrol'), { keys, rows });
	const people = await loadParticipants(app.db, await member.grantFor('participant:list'));
	const participantIds = people.map(({ id }) => id);
	const consent = await member.grantFor('consent:record');
	await recordConsent(app.db, clock, consent, {
		participantIds,
		textVersion: 'v3',
		signedOn: '2027-03-01'
	});
	return participantIds;
}

async function propose(participantId: string, member: Member = coordinator) {
	const grant = await member.grantFor('booking:change');
	const found = await proposeChains(app.db, clock, grant, { participantId });
	if (!found.ok) throw new Error(found.reason);
	return found;
}

async function bookFirst(participantId: string, member: Member = coordinator) {
	const { plan, chains } = await propose(participantId, member);
	const grant = await member.grantFor('booking:change');
	const places = chains[0]?.visits ?? [];
	return savePlan(app.db, clock, grant, {
		participantId,
		places,
		planVersion: plan.planVersion,
		mail
	});
}

async function visitsOf(participantId: string) {
	return loadVisits(app.db, await coordinator.grantFor('booking:read'), { participantId });
}

async function move(
	participantId: string,
	places: { visitNumber: number; startMs: number; rigId: string }[]
) {
	const grant = await coordinator.grantFor('booking:change');
	const planVersion = await loadPlanVersion(app.db, home.studyId);
	return savePlan(app.db, clock, grant, { participantId, places, planVersion, mail });
}

describe('a chain of visits', () => {
	it('is proposed with two hours’ notice and booked whole, with set-up and clean-up', async () => {
		const [participantId = ''] = await enrol(1);
		const { chains } = await propose(participantId);
		expect(chains).toHaveLength(3);
		expect(chains[0]?.visits[0]?.startMs).toBe(Date.UTC(2027, 2, 2, 9));
		expect(await bookFirst(participantId)).toMatchObject({ ok: true, bookedCount: 5 });
		const visits = await visitsOf(participantId);
		expect(visits.map((visit) => visit.visitNumber)).toEqual([1, 2, 3, 4, 5]);
		const gaps = visits.slice(1).map((visit, index) => {
			return (visit.startMs - (visits[index]?.startMs ?? 0)) / hourMs;
		});
		expect(gaps[1]).toBeGreaterThanOrEqual(20);
		expect(gaps[3]).toBeGreaterThanOrEqual(144);
		const [first] = visits;
		expect(first).toMatchObject({
			endMs: (first?.startMs ?? 0) + 45 * 60_000,
			occupiedFromMs: (first?.startMs ?? 0) - 15 * 60_000,
			occupiedToMs: (first?.startMs ?? 0) + 60 * 60_000
		});
	});

	it('is refused on a plan that changed since it was seen', async () => {
		const [first = '', second = ''] = await enrol(2);
		const seen = await propose(second);
		await bookFirst(first);
		const grant = await coordinator.grantFor('booking:change');
		const input = { participantId: second, places: seen.chains[0]?.visits ?? [] };
		const planVersion = seen.plan.planVersion;
		const outcome = await savePlan(app.db, clock, grant, { ...input, planVersion, mail });
		expect(outcome).toEqual({ ok: false, reason: 'stale' });
		expect(await visitsOf(second)).toEqual([]);
	});

	it('needs consent, an open study and a person who has not withdrawn', async () => {
		const [participantId = ''] = await enrol(1);
		const attempt = () => bookFirst(participantId);
		await owner.db
			.update(participant)
			.set({ consentedAt: null })
			.where(eq(participant.id, participantId));
		expect(await attempt()).toEqual({ ok: false, reason: 'no-consent' });
		await owner.db
			.update(participant)
			.set({ consentedAt: new Date(), withdrawnAt: new Date() })
			.where(eq(participant.id, participantId));
		expect(await attempt()).toEqual({ ok: false, reason: 'withdrawn' });
		await owner.db.insert(studyPause).values({
			studyId: home.studyId,
			participantId,
			reason: 'asked for it',
			pausedAt: new Date()
		});
		expect(await attempt()).toMatchObject({ reason: 'gates-missing', gates: [{ code: 'paused' }] });
	});

	it('of somebody in another study cannot be booked with this study’s grant', async () => {
		const [participantId = ''] = await enrol(1);
		const other = await plantStudy(owner.db, home, { codePrefix: 'OT' });
		const stranger = await plantMember(owner.db, other, 'coordinator');
		const grant = await stranger.grantFor('booking:change');
		const places = (await propose(participantId)).chains[0]?.visits ?? [];
		const outcome = await savePlan(app.db, clock, grant, {
			participantId,
			places,
			planVersion: 0,
			mail
		});
		expect(outcome).toEqual({ ok: false, reason: 'not-found' });
	});
});

describe('a double booking', () => {
	it('is refused to one of two people who book the same place at once', async () => {
		const other = await plantStudy(owner.db, home, { codePrefix: 'OT' });
		const colleague = await plantMember(owner.db, other, 'coordinator');
		const [mine = ''] = await enrol(1);
		const [theirs = ''] = await enrol(1, colleague);
		const place = (await propose(mine)).chains[0]?.visits ?? [];
		const save = async (member: Member, participantId: string) => {
			const grant = await member.grantFor('booking:change');
			return savePlan(app.db, clock, grant, { participantId, places: place, planVersion: 0, mail });
		};
		const outcomes = await Promise.all([save(coordinator, mine), save(colleague, theirs)]);
		expect(outcomes.map(({ ok }) => ok).sort()).toEqual([false, true]);
		const refused = outcomes.find(({ ok }) => !ok);
		expect(refused).toMatchObject({ reason: 'breaks-rules' });
		const rules = refused && 'broken' in refused ? refused.broken.map(({ rule }) => rule) : [];
		expect(rules).toContain('rig-busy');
		const [count] = await owner.db
			.select({ value: sql<number>`count(*)::int` })
			.from(booking)
			.where(eq(booking.rigId, place[0]?.rigId ?? ''));
		expect(count?.value).toBe(place.filter((one) => one.rigId === place[0]?.rigId).length);
	});

	it('that slips past every check is refused by the database and explained', async () => {
		const other = await plantStudy(owner.db, home, { codePrefix: 'OT' });
		const colleague = await plantMember(owner.db, other, 'coordinator');
		const [mine = ''] = await enrol(1);
		const [theirs = ''] = await enrol(1, colleague);
		const { plan, chains } = await propose(mine);
		const first = chains[0]?.visits[0];
		if (!first) throw new Error('no chain');
		const grant = await coordinator.grantFor('booking:change');
		const places = chains[0]?.visits ?? [];
		let saving: ReturnType<typeof savePlan> | undefined;
		await owner.db.transaction(async (tx) => {
			const startsAt = new Date(first.startMs);
			const during = { startsAt, endsAt: new Date(first.startMs + 45 * 60_000) };
			await tx.insert(booking).values({
				studyId: other.studyId,
				participantId: theirs,
				visitNumber: 1,
				rigId: first.rigId,
				roomId: plan.lab.rigs.find(({ id }) => id === first.rigId)?.roomId ?? '',
				staffId: home.staffIds.find((id) => id !== first.staffId) ?? '',
				during,
				occupied: during,
				createdAt: startsAt,
				changedAt: startsAt
			});
			const input = { participantId: mine, places, planVersion: plan.planVersion, mail };
			saving = savePlan(app.db, clock, grant, input);
			// The other booking is committed only when this one waits for it at its own commit.
			await waitForBlockedCommit();
		});
		const outcome = await saving;
		expect(outcome).toMatchObject({ ok: false, reason: 'taken' });
		const sentence = outcome && 'clash' in outcome ? outcome.clash.sentence : '';
		expect(sentence).toMatch(
			/^(Gull|Heron|Room 1|Room 2) is taken on Tue 2 March 2027, \d\d:\d\d to /
		);
		expect(await visitsOf(mine)).toEqual([]);
	});
});

async function waitForBlockedCommit(): Promise<void> {
	for (let attempt = 0; attempt < 400; attempt += 1) {
		const rows = await app.db.execute(
			sql`select 1 from pg_locks where not granted and locktype = 'transactionid'`
		);
		if (rows.length > 0) return;
		await new Promise((resolve) => setTimeout(resolve, 25));
	}
	throw new Error('nobody waited for the other booking');
}

describe('moving visits', () => {
	it('is refused with the rule’s name and number, and changes nothing', async () => {
		const [participantId = ''] = await enrol(1);
		await bookFirst(participantId);
		const before = await visitsOf(participantId);
		const day2 = before[2];
		const outcome = await move(participantId, [
			{ visitNumber: 3, startMs: (day2?.startMs ?? 0) + 7 * hourMs, rigId: day2?.rigId ?? '' }
		]);
		expect(outcome).toMatchObject({ ok: false, reason: 'breaks-rules' });
		const broken = outcome.ok || !('broken' in outcome) ? [] : outcome.broken;
		expect(broken.map(({ rule }) => rule)).toContain('gap-too-long');
		expect(broken[0]?.sentence).toMatch(/the protocol wants 20 to 28 h/);
		expect(await visitsOf(participantId)).toEqual(before);
	});

	it('moves all of a person’s visits together, though each by itself would break a rule', async () => {
		const [participantId = ''] = await enrol(1);
		await bookFirst(participantId);
		const visits = await visitsOf(participantId);
		const later = visits.map(({ visitNumber, startMs, rigId }) => {
			return { visitNumber, startMs: startMs + hourMs, rigId };
		});
		expect(await move(participantId, later)).toMatchObject({
			ok: true,
			movedCount: 5,
			bookedCount: 0
		});
		const moved = await visitsOf(participantId);
		expect(moved.map(({ startMs }) => startMs)).toEqual(later.map(({ startMs }) => startMs));
	});

	it('sends one update of the same event for a visit that was told, none for the others', async () => {
		const [participantId = ''] = await enrol(1);
		expect(await bookFirst(participantId)).toMatchObject({ mailCount: 1 });
		const [first] = await visitsOf(participantId);
		if (!first) throw new Error('nothing booked');
		const at = new Date(plantedNowMs);
		await owner.db
			.update(outbox)
			.set({ state: 'sent', sentAt: at })
			.where(eq(outbox.participantId, participantId));
		await owner.db
			.update(booking)
			.set({ answer: 'asks-other-time', answeredAt: at })
			.where(eq(booking.id, first.bookingId));
		const all = (await visitsOf(participantId)).map(({ visitNumber, startMs, rigId }) => {
			return { visitNumber, startMs: startMs + 15 * 60_000, rigId };
		});
		expect(await move(participantId, all)).toMatchObject({ movedCount: 5, mailCount: 1 });
		const [moved, untold] = await visitsOf(participantId);
		expect(moved).toMatchObject({ sequence: first.sequence + 1, answer: 'none' });
		expect(untold).toMatchObject({ sequence: 0, invitedAtMs: null });
		const mails = await owner.db
			.select({ kind: outbox.kind, sequence: outbox.sequence })
			.from(outbox)
			.where(eq(outbox.participantId, participantId))
			.orderBy(asc(outbox.sequence));
		expect(mails).toEqual([
			{ kind: 'invitation', sequence: 0 },
			{ kind: 'moved', sequence: 1 }
		]);
	});

	it('obeys the earliest start once there is one', async () => {
		const [participantId = ''] = await enrol(1);
		await bookFirst(participantId);
		const day1 = (await visitsOf(participantId))[1];
		await owner.db
			.update(participant)
			.set({ earliestStartAt: new Date((day1?.startMs ?? 0) + 60 * 24 * hourMs) })
			.where(eq(participant.id, participantId));
		const outcome = await move(participantId, [
			{ visitNumber: 2, startMs: (day1?.startMs ?? 0) + 15 * 60_000, rigId: day1?.rigId ?? '' }
		]);
		const broken = outcome.ok || !('broken' in outcome) ? [] : outcome.broken;
		expect(broken.map(({ rule }) => rule)).toContain('before-earliest-start');
	});

	it('is judged for every quarter hour of a day as saving judges it', async () => {
		const [participantId = ''] = await enrol(1);
		await bookFirst(participantId);
		const day2 = (await visitsOf(participantId))[2];
		if (!day2) throw new Error('nothing booked');
		const grant = await coordinator.grantFor('booking:change');
		const movable = await loadMovable(app.db, clock, grant, { bookingId: day2.bookingId });
		if (!movable.ok) throw new Error(movable.reason);
		const dayStart = Date.UTC(2027, 2, new Date(day2.startMs).getUTCDate(), 8);
		const window = { fromMs: dayStart, toMs: dayStart + 10 * hourMs };
		const stretches = judgeWindow(movable, window);
		const allowed = stretches.filter(({ refusedBy }) => refusedBy === null);
		const refused = stretches.filter(({ refusedBy }) => refusedBy !== null);
		expect(allowed.length).toBeGreaterThan(0);
		expect(refused.length).toBeGreaterThan(0);
		for (const { rigId, toMs } of refused) {
			expect((await move(participantId, [{ visitNumber: 3, startMs: toMs, rigId }])).ok).toBe(
				false
			);
		}
		const { rigId, toMs } = allowed.at(-1) ?? { rigId: '', toMs: 0 };
		expect((await move(participantId, [{ visitNumber: 3, startMs: toMs, rigId }])).ok).toBe(true);
	});
});

describe('cancelling, settling and withdrawing', () => {
	it('frees a visit’s place for somebody else', async () => {
		const [first = '', second = ''] = await enrol(2);
		await bookFirst(first);
		const [visit] = await visitsOf(first);
		const grant = await coordinator.grantFor('booking:change');
		const bookingId = visit?.bookingId ?? '';
		expect(await cancelVisit(app.db, clock, grant, { bookingId, mail })).toMatchObject({
			ok: true
		});
		expect(await cancelVisit(app.db, clock, grant, { bookingId, mail })).toEqual({
			ok: false,
			reason: 'not-booked'
		});
		await bookFirst(second);
		expect((await visitsOf(second))[0]?.startMs).toBe(visit?.startMs);
	});

	it('leaves a visit where it is and takes the request off the list', async () => {
		const [participantId = ''] = await enrol(1);
		await bookFirst(participantId);
		const bookingId = (await visitsOf(participantId))[0]?.bookingId ?? '';
		const grant = await coordinator.grantFor('booking:change');
		const settle = () => settleRequest(app.db, clock, grant, { bookingId });
		expect(await settle()).toEqual({ ok: false, reason: 'no-request' });
		await owner.db
			.update(booking)
			.set({ answer: 'declined', answeredAt: new Date(plantedNowMs - 1) })
			.where(eq(booking.id, bookingId));
		expect(await settle()).toEqual({ ok: true });
		expect(await settle()).toEqual({ ok: false, reason: 'no-request' });
	});

	it('stops the bookings of a person who withdraws, and keeps what was before', async () => {
		const [participantId = ''] = await enrol(1);
		await bookFirst(participantId);
		const [first, second] = await visitsOf(participantId);
		await owner.db
			.update(booking)
			.set({ state: 'attended' })
			.where(eq(booking.id, first?.bookingId ?? ''));
		clock.set((second?.startMs ?? 0) - hourMs);
		const grant = await coordinator.grantFor('participant:withdraw');
		const withdraw = () => withdrawPerson(app.db, clock, grant, { participantId, mail });
		expect(await withdraw()).toMatchObject({ ok: true, cancelledCount: 4, mailCount: 1 });
		expect(await withdraw()).toEqual({ ok: false, reason: 'withdrawn-already' });
		expect((await visitsOf(participantId)).map(({ state }) => state)).toEqual([
			'attended',
			...Array.from({ length: 4 }, () => 'cancelled')
		]);
	});

	it('is all in the record, by kind', async () => {
		const [participantId = ''] = await enrol(1);
		await bookFirst(participantId);
		const visits = await visitsOf(participantId);
		const grant = await coordinator.grantFor('booking:change');
		await cancelVisit(app.db, clock, grant, { bookingId: visits[4]?.bookingId ?? '', mail });
		const withdrawal = await coordinator.grantFor('participant:withdraw');
		await withdrawPerson(app.db, clock, withdrawal, { participantId, mail });
		const events = await owner.db
			.select({ kind: recordEvent.kind })
			.from(recordEvent)
			.where(
				and(eq(recordEvent.studyId, home.studyId), eq(recordEvent.actorId, coordinator.personId))
			)
			.orderBy(asc(recordEvent.seq));
		expect(events.map(({ kind }) => kind)).toEqual([
			'people-enrolled',
			'consent-recorded',
			'visits-booked',
			'visit-cancelled',
			'person-withdrawn'
		]);
	});
});

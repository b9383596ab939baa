import { generateKeyPairSync, randomUUID } from 'node:crypto';
import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import { createClock } from '$lib/server/clock';
import { openDatabase, type Database, type DatabaseHandle } from '$lib/server/db/client';
import { booking, participant, recordEvent, rig, room } from '$lib/server/db/schema';
import { addHolidays, removeHoliday } from '$lib/server/labs/change-holidays';
import { changeLab } from '$lib/server/labs/change-lab';
import { addRig, changeRig, restoreRig, retireRig, setRigKey } from '$lib/server/labs/change-rigs';
import { addRoom, removeRoom } from '$lib/server/labs/change-rooms';
import { addStaff, changeStaff, endStaff } from '$lib/server/labs/change-staff';
import {
	findLabGaps,
	loadHolidays,
	loadLab,
	loadRigs,
	loadRooms,
	loadStaff
} from '$lib/server/labs/load-lab';
import { setWeeklyHours } from '$lib/server/labs/set-weekly-hours';
import { createDatabase, type TestDatabase } from '../support/create-database';
import { plantEmptyLab, plantPerson, type PlantedPerson } from '../support/plant-person';
import { plantLab, plantStudy } from '../support/planted-study';

let database: TestDatabase;
let app: DatabaseHandle;
let owner: DatabaseHandle;
let db: Database;
const clock = createClock(0);
let labId: string;
let steward: PlantedPerson;
const manage = () => steward.grantFor('lab:manage', { labId });
const morning = { weekday: 1, opensMinute: 540, closesMinute: 720 };
const afternoon = { weekday: 1, opensMinute: 780, closesMinute: 1020 };
const rigFacts = {
	name: 'Gull',
	isPowered: true,
	minutesPerVisit: 90,
	trialsPerVisit: 400,
	variableMax: 'release_speed_m_s 1.8',
	shiftMax: 0.4,
	penaltyShareMax: null,
	limitsChecked: true
};

beforeAll(async () => {
	database = await createDatabase();
	app = openDatabase(database.appUrl);
	owner = openDatabase(database.ownerUrl);
	db = app.db;
});
beforeEach(async () => {
	labId = await plantEmptyLab(owner.db);
	steward = await plantPerson(owner.db, 'Sigrid Steward', { labId, isSteward: true });
});
afterAll(async () => {
	await app.end();
	await owner.end();
	await database.drop();
});

async function makeRig(name = 'Gull'): Promise<{ rigId: string; roomId: string }> {
	const grant = await manage();
	const { id: roomId } = await addRoom(db, clock, grant, { name: 'Room 12', directions: '' });
	const answer = await addRig(db, clock, grant, { ...rigFacts, name, roomId });
	if (!answer.ok) throw new Error(answer.reason);
	return { rigId: answer.id, roomId };
}

describe('setting up a lab', () => {
	test('names what is missing until nothing is', async () => {
		const grant = await manage();
		expect(await findLabGaps(db, grant)).toEqual(['phone', 'room', 'rig', 'staff']);
		const { rigId } = await makeRig();
		expect(await findLabGaps(db, grant)).toEqual(['phone', 'rig-hours', 'rig-key', 'staff']);
		await setWeeklyHours(db, clock, grant, { owner: { rigId }, hours: [morning] });
		await setRigKey(db, clock, grant, { id: rigId, key: publicKey() });
		await addStaff(db, clock, grant, { name: 'Ada', personId: null, hours: [] });
		await changeLab(db, clock, grant, { ...(await loadLab(db, grant)), phone: '+47 22 00 00 00' });
		expect(await findLabGaps(db, grant)).toEqual(['staff-hours']);
	});

	test('leaves an event for each change, and none when nothing changed', async () => {
		const grant = await manage();
		const before = await loadLab(db, grant);
		await changeLab(db, clock, grant, before);
		await makeRig();
		await changeLab(db, clock, grant, { ...before, phone: '+47 22 00 00 00' });
		const events = await db.select().from(recordEvent).where(eq(recordEvent.labId, labId));
		expect(events.map(({ kind }) => kind)).toEqual(['room-added', 'rig-added', 'lab-changed']);
		expect(events.every(({ actorId }) => actorId === steward.id)).toBe(true);
		expect(events.at(-1)?.body).toBe('{"changed":["phone"]}');
	});
});

describe('rigs', () => {
	test('have limits, hours and a key', async () => {
		const { rigId } = await makeRig();
		const grant = await manage();
		const hours = [morning, afternoon];
		await setWeeklyHours(db, clock, grant, { owner: { rigId }, hours: [afternoon] });
		await setWeeklyHours(db, clock, grant, { owner: { rigId }, hours });
		const key = publicKey();
		expect((await setRigKey(db, clock, grant, { id: rigId, key })).ok).toBe(true);
		const [found] = await loadRigs(db, grant);
		expect(found).toMatchObject({
			name: 'Gull',
			roomName: 'Room 12',
			hours,
			limits: {
				isPowered: true,
				minutesPerVisit: 90,
				trialsPerVisit: 400,
				variableMax: { release_speed_m_s: 1.8 },
				shiftMax: 0.4
			},
			publicKey: { ...key, use: 'enc' }
		});
	});

	test('refuse a key whose point is not on the curve', async () => {
		const { rigId } = await makeRig();
		const key = { ...publicKey(), y: 'A'.repeat(43) };
		expect(await setRigKey(db, clock, await manage(), { id: rigId, key })).toEqual({
			ok: false,
			reason: 'not-on-curve'
		});
	});

	test('have one name each, whatever its case', async () => {
		const { roomId } = await makeRig();
		const answer = await addRig(db, clock, await manage(), { ...rigFacts, name: 'gull', roomId });
		expect(answer).toEqual({ ok: false, reason: 'name-taken' });
	});

	test('are retired and taken back', async () => {
		const { rigId } = await makeRig();
		const grant = await manage();
		expect(await retireRig(db, clock, grant, rigId)).toEqual({ ok: true });
		expect((await loadRooms(db, grant))[0]?.rigNames).toEqual([]);
		expect(await restoreRig(db, clock, grant, rigId)).toEqual({ ok: true });
		expect((await loadRooms(db, grant))[0]?.rigNames).toEqual(['Gull']);
	});
});

describe('visits that are booked', () => {
	test('keep the rig, its room, the staff and the time zone as they are', async () => {
		const home = await plantStudy(owner.db, await plantLab(owner.db));
		const keeper = await plantPerson(owner.db, 'Keeper', { labId: home.labId, isSteward: true });
		const grant = await keeper.grantFor('lab:manage', { labId: home.labId });
		await plantVisit(home);
		const facts = await loadLab(db, grant);
		expect(await changeLab(db, clock, grant, { ...facts, zone: 'Europe/Oslo' })).toEqual({
			ok: false,
			reason: 'visits-booked'
		});
		expect(await changeLab(db, clock, grant, { ...facts, name: 'Another name' })).toEqual({
			ok: true
		});
		const busy = { ok: false, reason: 'visits-booked' };
		expect(await retireRig(db, clock, grant, home.rigIds[0])).toEqual(busy);
		expect(await endStaff(db, clock, grant, home.staffIds[0])).toEqual(busy);
		const rooms = await loadRooms(db, grant);
		const [found] = await db.select().from(rig).where(eq(rig.id, home.rigIds[0]));
		const roomId = rooms.find(({ id }) => id !== found?.roomId)?.id ?? '';
		const moved = { ...rigFacts, id: home.rigIds[0], roomId };
		expect(await changeRig(db, clock, grant, moved)).toEqual(busy);
		expect(await removeRoom(db, clock, grant, found?.roomId ?? '')).toEqual({
			ok: false,
			reason: 'has-rigs'
		});
		expect(await retireRig(db, clock, grant, home.rigIds[1])).toEqual({ ok: true });
	});

	async function plantVisit(home: Awaited<ReturnType<typeof plantStudy>>): Promise<void> {
		const participantId = randomUUID();
		const now = new Date();
		await owner.db.insert(participant).values({
			id: participantId,
			studyId: home.studyId,
			protocolVersionId: home.versionId,
			number: 1,
			code: 'TW-001',
			state: 'consented',
			zone: 'Europe/Lisbon',
			enrolledAt: now
		});
		const [place] = await owner.db.select().from(rig).where(eq(rig.id, home.rigIds[0]));
		const during = {
			startsAt: new Date(now.getTime() + 86_400_000),
			endsAt: new Date(now.getTime() + 90_000_000)
		};
		await owner.db.insert(booking).values({
			studyId: home.studyId,
			participantId,
			visitNumber: 1,
			rigId: home.rigIds[0],
			roomId: place?.roomId ?? '',
			staffId: home.staffIds[0],
			during,
			occupied: during,
			createdAt: now,
			changedAt: now
		});
	}
});

describe('rooms, staff and holidays', () => {
	test('an empty room is removed, one with a rig is not', async () => {
		const grant = await manage();
		const { roomId } = await makeRig();
		const { id } = await addRoom(db, clock, grant, { name: 'Cellar', directions: 'Down.' });
		expect(await removeRoom(db, clock, grant, id)).toEqual({
			ok: true,
			removed: { name: 'Cellar', directions: 'Down.' }
		});
		expect(await removeRoom(db, clock, grant, roomId)).toEqual({ ok: false, reason: 'has-rigs' });
		expect(await db.select().from(room).where(eq(room.labId, labId))).toHaveLength(1);
	});

	test('a member is in the staff once', async () => {
		const grant = await manage();
		const facts = { name: 'Sigrid', personId: steward.id, hours: [morning] };
		const answer = await addStaff(db, clock, grant, facts);
		expect(answer.ok).toBe(true);
		expect(await addStaff(db, clock, grant, facts)).toEqual({ ok: false, reason: 'member-taken' });
		if (!answer.ok) return;
		const changed = { id: answer.id, ...facts, hours: [afternoon] };
		expect((await changeStaff(db, clock, grant, changed)).ok).toBe(true);
		expect((await loadStaff(db, grant)).map(({ hours }) => hours)).toEqual([[afternoon]]);
		const stranger = await plantPerson(owner.db, 'Stranger');
		expect(await addStaff(db, clock, grant, { ...facts, personId: stranger.id })).toEqual({
			ok: false,
			reason: 'no-such-member'
		});
	});

	test('a closed day is kept once, from today on, and can be opened again', async () => {
		const grant = await manage();
		await addHolidays(db, clock, grant, [
			{ on: '2026-01-01', name: 'New Year' },
			{ on: '2037-05-17', name: 'Constitution Day' }
		]);
		await addHolidays(db, clock, grant, [{ on: '2037-05-17', name: 'National Day' }]);
		const found = await loadHolidays(db, grant, '2030-01-01');
		expect(found.map(({ on, name }) => [on, name])).toEqual([['2037-05-17', 'National Day']]);
		expect(await removeHoliday(db, clock, grant, found[0]?.id ?? '')).toEqual({
			ok: true,
			removed: { on: '2037-05-17', name: 'National Day' }
		});
		expect(await loadHolidays(db, grant, '2030-01-01')).toEqual([]);
	});
});

test('nothing of another lab can be changed or read', async () => {
	const { rigId, roomId } = await makeRig();
	const otherLab = await plantEmptyLab(owner.db, 'Other Lab');
	const otto = await plantPerson(owner.db, 'Otto', { labId: otherLab, isSteward: true });
	const grant = await otto.grantFor('lab:manage', { labId: otherLab });
	expect(await retireRig(db, clock, grant, rigId)).toEqual({ ok: false, reason: 'no-such-rig' });
	expect(await removeRoom(db, clock, grant, roomId)).toEqual({ ok: false, reason: 'no-such-room' });
	expect(await addRig(db, clock, grant, { ...rigFacts, roomId })).toEqual({
		ok: false,
		reason: 'no-such-room'
	});
	expect(await setWeeklyHours(db, clock, grant, { owner: { rigId }, hours: [morning] })).toEqual({
		ok: false,
		reason: 'no-such-owner'
	});
	expect(await loadRigs(db, grant)).toEqual([]);
	expect(await loadRooms(db, grant)).toEqual([]);
});

function publicKey() {
	const { publicKey: made } = generateKeyPairSync('ec', { namedCurve: 'P-256' });
	const { x = '', y = '' } = made.export({ format: 'jwk' });
	return { kty: 'EC', crv: 'P-256', x, y } as const;
}

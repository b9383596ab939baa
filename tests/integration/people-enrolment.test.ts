import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { eq } from 'drizzle-orm';
import { emptyCells, type EnrolmentCells } from '$lib/people/enrolment-columns';
import { openDatabase, type DatabaseHandle } from '$lib/server/db/client';
import { contact, ethicsApproval, participant, recordEvent } from '$lib/server/db/schema';
import type { PeopleKeys } from '$lib/server/keys/people-keys';
import { changeDetails } from '$lib/server/people/change-details';
import { checkRows } from '$lib/server/people/check-rows';
import { enrolPeople } from '$lib/server/people/enrol-people';
import { openContacts } from '$lib/server/people/load-contacts';
import { loadParticipants } from '$lib/server/people/load-participants';
import { recordConsent } from '$lib/server/people/record-consent';
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
let home: PlantedStudy;
let coordinator: Awaited<ReturnType<typeof plantMember>>;
const clock = createTestClock();

beforeAll(async () => {
	database = await createDatabase();
	app = openDatabase(database.appUrl);
	owner = openDatabase(database.ownerUrl);
	keys = await createTestKeys();
});

beforeEach(async () => {
	home = await plantStudy(owner.db, await plantLab(owner.db));
	coordinator = await plantMember(owner.db, home, 'coordinator');
});

afterAll(async () => {
	await app.end();
	await owner.end();
	await database.drop();
});

const row = (line: number, cells: Partial<EnrolmentCells>) => ({
	line,
	cells: { ...emptyCells, ...cells }
});
const ines = { name: 'Ines Invented', email: 'ines@mail.example', zone: 'Europe/Lisbon' };
const tess = { name: 'Tess Fictional', email: 'tess@mail' };
const olaf = { name: 'Olaf Imaginary', email: 'olaf@imaginary.example', zone: 'Lisboa' };

async function enrol(...rows: ReturnType<typeof row>[]) {
	return enrolPeople(app.db, clock, await coordinator.grantFor('participant:enrol'), {
		keys,
		rows
	});
}

describe('enrolPeople', () => {
	it('adds the rows without faults and gives the others back as typed', async () => {
		const outcome = await enrol(row(1, ines), row(2, tess), row(3, olaf));
		expect(outcome).toMatchObject({
			ok: true,
			codes: ['TW-001'],
			stayed: [
				{ line: 2, cells: tess, faults: [{ columnNumber: 2, value: 'tess@mail' }] },
				{ line: 3, cells: olaf, faults: [{ columnNumber: 4, suggestion: 'Europe/Lisbon' }] }
			]
		});
	});

	it('gives codes in series, also when two enrol at once', async () => {
		const many = (from: number) =>
			[0, 1, 2].map((index) =>
				row(index + 1, { name: `P${from + index}`, email: `p${from + index}@mail.example` })
			);
		const outcomes = await Promise.all([enrol(...many(10)), enrol(...many(20))]);
		const codes = outcomes.flatMap((outcome) => (outcome.ok ? outcome.codes : []));
		expect(codes.sort()).toEqual(['TW-001', 'TW-002', 'TW-003', 'TW-004', 'TW-005', 'TW-006']);
	});

	it('finds the same address again, in the rows and among the enrolled', async () => {
		await enrol(row(1, ines));
		const twin = { ...ines, name: 'I. Invented', email: ' Ines@MAIL.example' };
		const una = { name: 'Una', email: 'una@mail.example' };
		const grant = await coordinator.grantFor('participant:enrol');
		const rows = [row(1, twin), row(2, una), row(5, { ...una, name: 'Una again' })];
		const checked = await checkRows(app.db, grant, { keys, rows });
		expect(checked.map(({ faults }) => faults.map((fault) => fault.message))).toEqual([
			['is enrolled already, as TW-001'],
			[],
			['stands in line 2 already']
		]);
	});

	it('keeps names, addresses and numbers out of every column but the sealed one', async () => {
		await enrol(row(1, { ...ines, phone: '+351 21 000 0000' }));
		const [kept] = await owner.db
			.select()
			.from(contact)
			.innerJoin(participant, eq(participant.id, contact.participantId))
			.where(eq(participant.studyId, home.studyId));
		const plain = JSON.stringify(kept, (_key, value: unknown) =>
			value instanceof Uint8Array ? Buffer.from(value).toString('latin1') : value
		);
		for (const secret of ['Ines', 'ines@mail', '351']) expect(plain).not.toContain(secret);
		const events = await owner.db
			.select()
			.from(recordEvent)
			.where(eq(recordEvent.studyId, home.studyId));
		expect(events.map((event) => event.kind)).toEqual(['people-enrolled']);
		expect(JSON.stringify(events)).not.toContain('ines@mail');
	});

	it('stays shut while a gate is missing, and names it', async () => {
		await owner.db
			.update(ethicsApproval)
			.set({ expiresOn: '2027-03-01' })
			.where(eq(ethicsApproval.studyId, home.studyId));
		expect(await enrol(row(1, ines))).toMatchObject({
			ok: false,
			reason: 'gates-missing',
			gates: [{ code: 'approval-expired', whose: 'investigator' }]
		});
	});
});

describe('openContacts', () => {
	it('opens who people are, records that it did, and shows an erased person as such', async () => {
		await enrol(row(1, ines), row(2, { name: 'Una Unreal', email: 'una@mail.example' }));
		const grant = await coordinator.grantFor('participant:list');
		const [first] = await loadParticipants(app.db, grant);
		await keys.folder.destroyKey(first?.id ?? '');
		const opened = await openContacts(app.db, clock, grant, { keys });
		expect(opened.map(({ code, details }) => [code, details?.email ?? null])).toEqual([
			['TW-001', null],
			['TW-002', 'una@mail.example']
		]);
		const events = await owner.db
			.select()
			.from(recordEvent)
			.where(eq(recordEvent.studyId, home.studyId));
		expect(events.at(-1)).toMatchObject({ kind: 'contact-opened', item: 'contact' });
	});
});

describe('changeDetails', () => {
	it('mends an address and refuses one that belongs to somebody else', async () => {
		await enrol(row(1, ines), row(2, { name: 'Una Unreal', email: 'una@mail.example' }));
		const grant = await coordinator.grantFor('participant:enrol');
		const list = await coordinator.grantFor('participant:list');
		const participantId = (await loadParticipants(app.db, list))[0]?.id ?? '';
		const change = (email: string) =>
			changeDetails(app.db, clock, grant, {
				keys,
				mail: {
					keys: keys.folder,
					origin: 'http://ovalry.example',
					fromAddress: 'lab@lab.example'
				},
				participantId,
				cells: { ...emptyCells, ...ines, email, language: 'pt' }
			});
		expect(await change('una@mail.example')).toMatchObject({
			ok: false,
			faults: [{ column: 'email', message: 'is enrolled already, as TW-002' }]
		});
		expect(await change('ines@other.example')).toEqual({ ok: true });
		const [opened] = await openContacts(app.db, clock, list, { keys, participantId });
		expect(opened?.details?.email).toBe('ines@other.example');
		expect((await loadParticipants(app.db, list))[0]?.language).toBe('pt');
	});
});

describe('recordConsent', () => {
	it('keeps every consent and moves the person on at the first', async () => {
		await enrol(row(1, ines));
		const grant = await coordinator.grantFor('consent:record');
		const list = await coordinator.grantFor('participant:list');
		const participantIds = [(await loadParticipants(app.db, list))[0]?.id ?? ''];
		const record = (textVersion: string, signedOn: string) =>
			recordConsent(app.db, clock, grant, { participantIds, textVersion, signedOn });
		expect(await record('v2', '2027-03-03')).toEqual({ ok: false, reason: 'in-the-future' });
		expect(await record('v2', '2027-03-01')).toEqual({ ok: true, codes: ['TW-001'] });
		expect(await record('v3', '2027-03-02')).toEqual({ ok: true, codes: ['TW-001'] });
		const [person] = await loadParticipants(app.db, list);
		expect(person).toMatchObject({
			state: 'consented',
			consentedAtMs: Date.UTC(2027, 2, 1, 12),
			consent: { textVersion: 'v3', signedAtMs: plantedNowMs }
		});
	});

	it('knows nobody of another study', async () => {
		await enrol(row(1, ines));
		const list = await coordinator.grantFor('participant:list');
		const id = (await loadParticipants(app.db, list))[0]?.id ?? '';
		const other = await plantStudy(owner.db, home, { codePrefix: 'OT' });
		const stranger = await plantMember(owner.db, other, 'coordinator');
		const outcome = await recordConsent(app.db, clock, await stranger.grantFor('consent:record'), {
			participantIds: [id],
			textVersion: 'v3',
			signedOn: '2027-03-01'
		});
		expect(outcome).toEqual({ ok: false, reason: 'not-found' });
	});
});

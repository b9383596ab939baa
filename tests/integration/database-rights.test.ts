import { randomUUID } from 'node:crypto';
import postgres from 'postgres';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { openDatabase, type DatabaseHandle } from '$lib/server/db/client';
import { allocation, allocationSeal, participant, recordEvent } from '$lib/server/db/schema';
import { createDatabase, type TestDatabase } from '../support/create-database';
import { plantLab, plantStudy, type PlantedStudy } from '../support/planted-study';

let database: TestDatabase;
let owner: DatabaseHandle;
let app: postgres.Sql;
let research: postgres.Sql;
let admin: postgres.Sql;
let home: PlantedStudy;
const participantId = randomUUID();
const notAllowed = '42501';

beforeAll(async () => {
	database = await createDatabase();
	owner = openDatabase(database.ownerUrl);
	app = postgres(database.appUrl, { max: 22, onnotice: () => {} });
	research = postgres(database.researchUrl, { max: 1, onnotice: () => {} });
	admin = postgres(database.ownerUrl, { max: 1, onnotice: () => {} });
	home = await plantStudy(owner.db, await plantLab(owner.db));
	const { db } = owner;
	await db.insert(participant).values({
		id: participantId,
		studyId: home.studyId,
		protocolVersionId: home.versionId,
		number: 1,
		code: 'TW-001',
		state: 'allocated',
		zone: 'Europe/Lisbon',
		enrolledAt: new Date()
	});
	const [seal] = await db.select().from(allocationSeal);
	await db.insert(allocation).values({
		participantId,
		studyId: home.studyId,
		sealId: seal?.id ?? '',
		sequenceIndex: 0,
		arm: 'adaptive',
		allocatedAt: new Date()
	});
	await db.insert(recordEvent).values({
		at: new Date(),
		studyId: home.studyId,
		actorKind: 'system',
		kind: 'planted',
		item: 'record',
		body: '{}'
	});
	await plantDecision();
});
afterAll(async () => {
	await app.end();
	await research.end();
	await admin.end();
	await owner.end();
	await database.drop();
});

const decisionId = randomUUID();

async function plantDecision(): Promise<void> {
	await admin`insert into decision (id, study_id, participant_id, visit_number, block_number, protocol_hash,
		policy_hash, engine_version, runtime_version, inputs_digest, inputs, output, kind, code, hold_reasons, state, decided_at)
		values (${decisionId}, ${home.studyId}, ${participantId}, 2, 1, 'p', 'q', '1', '20', 'd', '{}', '{}', 'practice', 'c', '[]', 'held', now())`;
	await admin`insert into settlement (decision_id, action, block, reason, settled_at)
		values (${decisionId}, 'fallback', '{}', 'r', now())`;
}

/** The refusal of a statement, as the database gives it; null when it went through. */
async function refusalOf(sql: postgres.Sql, statement: string): Promise<string | null> {
	try {
		await sql.begin(async (tx) => {
			await tx.unsafe(statement);
			throw new Error('went through');
		});
	} catch (error) {
		if (error instanceof postgres.PostgresError) return error.code;
		if (error instanceof Error && error.message === 'went through') return null;
		throw error;
	}
	return null;
}

describe('the application’s role', () => {
	const history = [
		'record_event',
		'upload',
		'block',
		'trial',
		'allocation',
		'allocation_seal',
		'settlement',
		'consent',
		'sign_off'
	];

	test.each(history)('can neither change, remove nor empty %s', async (table) => {
		const column = await anyColumn(table);
		expect(await refusalOf(app, `update ${table} set ${column} = ${column}`)).toBe(notAllowed);
		expect(await refusalOf(app, `delete from ${table}`)).toBe(notAllowed);
		expect(await refusalOf(app, `truncate ${table}`)).toBe(notAllowed);
	});

	test.each(history)('not even as the owner: %s is fixed by a trigger', async (table) => {
		const column = await anyColumn(table);
		expect(await refusalOf(admin, `update ${table} set ${column} = ${column}`)).toBe(notAllowed);
		expect(await refusalOf(admin, `delete from ${table}`)).toBe(notAllowed);
	});

	test.each([
		['content', `content = '{}'`],
		['hash', `hash = 'other'`],
		['thawing', `hash = null, frozen_at = null`],
		['number', 'number = 9']
	])('cannot change a frozen version (%s)', async (_, change) => {
		expect(await refusalOf(app, `update protocol_version set ${change}`)).toBe(notAllowed);
	});

	test('cannot remove a protocol version, a study, a participant or a booking', async () => {
		for (const table of ['protocol_version', 'study', 'participant', 'booking', 'decision']) {
			expect([table, await refusalOf(app, `delete from ${table}`)]).toEqual([table, notAllowed]);
		}
	});

	test.each([
		'inputs',
		'output',
		'inputs_digest',
		'kind',
		'code',
		'policy_hash',
		'engine_version',
		'hold_reasons',
		'decided_at'
	])('cannot rewrite a decision’s %s', async (column) => {
		expect(await refusalOf(app, `update decision set ${column} = ${column}`)).toBe(notAllowed);
	});

	test('can settle a decision and say when its block is ready', async () => {
		const change = `update decision set state = 'settled', ready_at = now()`;
		expect(await refusalOf(app, change)).toBe(null);
	});

	test('cannot rewrite who was given which role, nor remove it', async () => {
		for (const column of ['role', 'person_id', 'study_id', 'given_by', 'given_at']) {
			const change = `update study_role set ${column} = ${column}`;
			expect([column, await refusalOf(app, change)]).toEqual([column, notAllowed]);
		}
		expect(await refusalOf(app, 'delete from study_role')).toBe(notAllowed);
	});

	test('can revoke an ethics approval or a bundle, and change nothing else of it', async () => {
		for (const table of ['ethics_approval', 'bundle']) {
			expect(await refusalOf(app, `update ${table} set revoked_at = now()`)).toBe(null);
			const change = `update ${table} set study_id = study_id`;
			expect(await refusalOf(app, change)).toBe(notAllowed);
			expect(await refusalOf(app, `delete from ${table}`)).toBe(notAllowed);
		}
	});

	test('owns nothing, and can alter no table, trigger or role', async () => {
		const [owned] = await app`select count(*)::int as found from pg_class as c
			join pg_roles as r on r.oid = c.relowner where r.rolname = 'ovalry_app'`;
		expect(owned?.found).toBe(0);
		const statements = [
			'alter table record_event disable trigger all',
			'drop trigger record_event_fixed on record_event',
			'drop table record_event',
			'create table mine (id int)',
			'alter role ovalry_app superuser',
			'create role other'
		];
		for (const statement of statements) {
			const refusal = await refusalOf(app, statement);
			expect([statement, refusal]).not.toEqual([statement, null]);
		}
		expect(await refusalOf(app, `set session_replication_role = replica`)).toBe(notAllowed);
		// PostgreSQL answers this one with a warning only: what counts is that nothing came of it.
		await app`grant delete on record_event to ovalry_app`;
		const [right] = await app`select has_table_privilege('record_event', 'delete') as has`;
		expect(right?.has).toBe(false);
	});

	test('chains each event of the record to the one before it, whatever it claims', async () => {
		const forged = `insert into record_event (seq, at, actor_kind, kind, item, body, previous_hash, hash)
			values (7, now(), 'system', 'forged', 'record', '{}', 'none', 'none') returning seq, previous_hash, hash`;
		const rows = await app.begin(async (tx) => {
			const [last] = await tx`select seq, hash from record_event order by seq desc limit 1`;
			const [added] = await tx.unsafe(forged);
			return { last, added };
		});
		expect(Number(rows.added?.seq)).toBe(Number(rows.last?.seq) + 1);
		expect(rows.added?.previous_hash).toBe(rows.last?.hash);
		expect(rows.added?.hash).toMatch(/^[0-9a-f]{64}$/);
	});

	async function anyColumn(table: string): Promise<string> {
		const [row] = await admin`select column_name from information_schema.columns
			where table_schema = 'public' and table_name = ${table} order by ordinal_position limit 1`;
		return String(row?.column_name);
	}
});

describe('the role for research queries', () => {
	test.each([
		'contact',
		'person',
		'account',
		'session',
		'verification_token',
		'membership',
		'study_role',
		'allocation',
		'allocation_seal',
		'decision',
		'settlement',
		'bundle',
		'outbox',
		'answer_link',
		'record_event',
		'consent',
		'upload',
		'setup_link'
	])('cannot read %s', async (table) => {
		expect(await refusalOf(research, `select * from ${table}`)).toBe(notAllowed);
	});

	test.each(['study', 'protocol_version', 'participant', 'block', 'trial'])(
		'reads %s and changes nothing in it',
		async (table) => {
			expect(await refusalOf(research, `select * from ${table}`)).toBe(null);
			expect(await refusalOf(research, `delete from ${table}`)).toBe(notAllowed);
		}
	);

	test('reads when a visit was, and not what its participant wrote', async () => {
		expect(await refusalOf(research, 'select id, during, state from booking')).toBe(null);
		expect(await refusalOf(research, 'select answer_note from booking')).toBe(notAllowed);
	});
});

describe('a double booking', () => {
	const slot = `tstzrange('2027-03-09 10:00+00', '2027-03-09 11:00+00')`;
	const wide = `tstzrange('2027-03-09 09:45+00', '2027-03-09 11:15+00')`;

	async function plantPeople(count: number): Promise<string[]> {
		const ids = Array.from({ length: count }, () => randomUUID());
		await owner.db.insert(participant).values(
			ids.map((id, index) => ({
				id,
				studyId: home.studyId,
				protocolVersionId: home.versionId,
				number: 100 + index,
				code: `TW-${100 + index}`,
				state: 'consented' as const,
				zone: 'Europe/Lisbon',
				enrolledAt: new Date()
			}))
		);
		return ids;
	}

	test('of one rig, tried twenty times at once, succeeds once and is refused nineteen times', async () => {
		const ids = await plantPeople(20);
		const [room] = await admin`select room_id from rig where id = ${home.rigIds[0]}`;
		const tries = await Promise.allSettled(
			ids.map((id) =>
				app.unsafe(`insert into booking (study_id, participant_id, visit_number, rig_id, room_id, staff_id, during, occupied, created_at, changed_at)
					values ('${home.studyId}', '${id}', 1, '${home.rigIds[0]}', '${room?.room_id}', '${home.staffIds[0]}', ${slot}, ${wide}, now(), now())`)
			)
		);
		const refused = tries.filter((one) => one.status === 'rejected');
		expect(tries.length - refused.length).toBe(1);
		expect(refused.map((one) => one.reason.code)).toEqual(Array(19).fill('23P01'));
		for (const one of refused) {
			expect(one.reason.constraint_name).toMatch(/^booking_no_(rig|room|staff)_clash$/);
		}
	}, 60_000);

	test('of one person over the visit itself is refused on another rig too', async () => {
		const [room] = await admin`select room_id from rig where id = ${home.rigIds[1]}`;
		const [booked] = await admin`select participant_id from booking limit 1`;
		const overlap = `tstzrange('2027-03-09 10:30+00', '2027-03-09 11:30+00')`;
		const statement = `insert into booking (study_id, participant_id, visit_number, rig_id, room_id, staff_id, during, occupied, created_at, changed_at)
			values ('${home.studyId}', '${booked?.participant_id}', 2, '${home.rigIds[1]}', '${room?.room_id}', '${home.staffIds[1]}', ${overlap}, ${overlap}, now(), now())`;
		await expect(app.unsafe(statement)).rejects.toMatchObject({
			code: '23P01',
			constraint_name: 'booking_no_person_clash'
		});
	});
});

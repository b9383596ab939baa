import { mkdtempSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { asc } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { recordAttendance } from '$lib/server/attendance/record-attendance';
import { markCancelled } from '$lib/server/bookings/cancel-visit';
import { loadVisits } from '$lib/server/bookings/load-visits';
import { issueDueBundles } from '$lib/server/bundles/issue-due-bundles';
import { openDatabase, type DatabaseHandle } from '$lib/server/db/client';
import { bundle } from '$lib/server/db/schema';
import { decideDue } from '$lib/server/decisions/decide-due';
import { loadSigningKey } from '$lib/server/keys/signing-key';
import { createDatabase, type TestDatabase } from '../support/create-database';
import { createPuckProtocol } from '../support/puck-protocol';
import { hourMs, plantRunningStudy, type RunningStudy } from '../support/running-study';

/** A file is sealed for one rig and one time: whatever changes either makes it worthless. */

const start = Date.parse('2027-03-08T09:00:00Z');
const dayMs = 24 * hourMs;
let database: TestDatabase;
let owner: DatabaseHandle;
let app: DatabaseHandle;
let study: RunningStudy;
let catchUp: () => Promise<void>;
let nowMs = start - 13 * hourMs;
const clock = { now: () => nowMs };

beforeAll(async () => {
	database = await createDatabase();
	owner = openDatabase(database.ownerUrl);
	app = openDatabase(database.appUrl);
	study = await plantRunningStudy(owner.db, createPuckProtocol(), nowMs - dayMs);
	const folder = mkdtempSync(join(tmpdir(), 'ovalry-keys-'));
	const wrappingKey = Buffer.alloc(32, 3).toString('base64url');
	const key = await loadSigningKey({ folder, wrappingKey });
	catchUp = async () => {
		await decideDue(app.db, { clock, allocate: async () => false });
		await issueDueBundles(app.db, { clock, signingKey: async () => key });
	};
});
afterAll(async () => {
	await app.end();
	await owner.end();
	await database.drop();
});

/** Every file made so far, oldest first: whether it still opens something, and until when. */
async function listFiles() {
	const rows = await owner.db.select().from(bundle).orderBy(asc(bundle.issuedAt));
	return rows.map(({ revokedAt, expiresAt }) => ({
		isRevoked: revokedAt !== null,
		expiresOn: expiresAt.toISOString().slice(0, 10)
	}));
}

describe('the file of a visit', () => {
	it('is worthless once the person did not come, and made anew for the next time', async () => {
		const person = await study.enrol('Q11');
		const first = await study.book(person.id, 1, start);
		nowMs = start - 2 * hourMs;
		await catchUp();
		expect(await listFiles()).toEqual([{ isRevoked: false, expiresOn: '2027-03-08' }]);

		nowMs = start + hourMs;
		const grant = study.grant('attendance:record');
		const outcome = { bookingId: first.id, outcome: 'no-show' } as const;
		expect(await recordAttendance(app.db, clock, grant, outcome)).toMatchObject({ ok: true });
		expect(await listFiles()).toEqual([{ isRevoked: true, expiresOn: '2027-03-08' }]);

		await study.book(person.id, 1, start + dayMs);
		nowMs = start + dayMs - 2 * hourMs;
		await catchUp();
		expect(await listFiles()).toEqual([
			{ isRevoked: true, expiresOn: '2027-03-08' },
			{ isRevoked: false, expiresOn: '2027-03-09' }
		]);
	});

	it('is worthless once the visit’s place is freed', async () => {
		const grant = study.grant('booking:change');
		const booked = (await loadVisits(app.db, grant)).find(({ state }) => state === 'booked');
		expect(booked?.visitNumber).toBe(1);
		await app.db.transaction(async (tx) => booked && markCancelled(tx, clock, booked));
		expect((await listFiles()).map(({ isRevoked }) => isRevoked)).toEqual([true, true]);
	});
});

import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { deriveEntry } from '$scheduler/allocation/permuted-blocks';
import { allocateParticipant } from '$lib/server/allocation/allocate-participant';
import { openDatabase, type DatabaseHandle } from '$lib/server/db/client';
import { allocation, allocationSeal, participant } from '$lib/server/db/schema';
import { createAllocationStream, sealAllocation } from '$lib/server/keys/allocation-seal';
import { createDatabase, type TestDatabase } from '../support/create-database';
import { createPuckProtocol } from '../support/puck-protocol';
import { hourMs, plantRunningStudy, type RunningStudy } from '../support/running-study';

const nowMs = Date.parse('2027-03-08T09:00:00Z');
const key = Buffer.alloc(32, 7).toString('base64url');
const secret = { seed: new Uint8Array(32).fill(5), nonce: new Uint8Array(32).fill(6) };
const services = { clock: { now: () => nowMs }, settings: { OVALRY_ALLOCATION_KEY: key } };

let database: TestDatabase;
let owner: DatabaseHandle;
let app: DatabaseHandle;
let study: RunningStudy;

beforeAll(async () => {
	database = await createDatabase();
	owner = openDatabase(database.ownerUrl);
	app = openDatabase(database.appUrl);
	study = await plantRunningStudy(owner.db, createPuckProtocol(), nowMs);
	const { sealed, commitment } = sealAllocation(key, study.study.id, secret);
	await owner.db.transaction(async (tx) => {
		await tx.execute('alter table allocation_seal disable trigger allocation_seal_fixed');
		await tx
			.update(allocationSeal)
			.set({
				sealedSeed: sealed,
				commitment,
				method: { arms: ['adaptive', 'fixed'], blockSizes: [2, 4] }
			})
			.where(eq(allocationSeal.id, study.seal.id));
	});
});
afterAll(async () => {
	await Promise.all([owner.end(), app.end()]);
	await database.drop();
});

async function enrolReady(code: string): Promise<string> {
	const { id } = await study.enrol(code);
	await owner.db.update(participant).set({ state: 'baseline-done' }).where(eq(participant.id, id));
	return id;
}
const release = (id: string) => app.db.transaction((tx) => allocateParticipant(tx, services, id));

describe('the sealed sequence', () => {
	it('is released one person at a time, in its own order', async () => {
		const ids: string[] = [];
		for (const code of ['TW-001', 'TW-002', 'TW-003', 'TW-004']) ids.push(await enrolReady(code));
		for (const id of ids) expect(await release(id)).toBe(true);
		const scheme = {
			arms: [
				{ id: 'adaptive', weight: 1 },
				{ id: 'fixed', weight: 1 }
			],
			blockSizes: [2, 4]
		};
		const openStream = (name: string) => createAllocationStream(secret.seed, name);
		for (const [index, id] of ids.entries()) {
			const [row] = await owner.db
				.select()
				.from(allocation)
				.where(eq(allocation.participantId, id));
			const entry = deriveEntry({ scheme, stratum: 'all', index, openStream });
			expect([row?.sequenceIndex, row?.arm]).toEqual([index, entry.armId]);
		}
	});

	it('gives nobody a second entry', async () => {
		const [first] = await owner.db.select().from(allocation);
		expect(await release(first?.participantId ?? '')).toBe(false);
		expect(await owner.db.select().from(allocation)).toHaveLength(4);
	});

	it('gives nothing to somebody whose baseline has not passed', async () => {
		const { id } = await study.enrol('TW-005');
		expect(await release(id)).toBe(false);
	});

	it('serves people who are ready at the same moment one after the other', async () => {
		const ids = await Promise.all(['TW-006', 'TW-007', 'TW-008', 'TW-009'].map(enrolReady));
		expect(await Promise.all(ids.map(release))).toEqual([true, true, true, true]);
		const indices = (await owner.db.select().from(allocation)).map((row) => row.sequenceIndex);
		expect(indices.sort((a, b) => a - b)).toEqual([0, 1, 2, 3, 4, 5, 6, 7]);
	});

	it('gives everybody an earliest start inside the protocol’s range', async () => {
		const rows = await owner.db
			.select()
			.from(participant)
			.where(eq(participant.state, 'allocated'));
		expect(rows).toHaveLength(8);
		for (const row of rows) {
			const hours = ((row.earliestStartAt?.getTime() ?? 0) - nowMs) / hourMs;
			expect(hours).toBeGreaterThanOrEqual(20);
			expect(hours).toBeLessThanOrEqual(30.25);
		}
	});
});

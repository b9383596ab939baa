import { mkdtempSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { and, eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { z } from 'zod';
import { issueDueBundles } from '$lib/server/bundles/issue-due-bundles';
import { openDatabase, type DatabaseHandle } from '$lib/server/db/client';
import { allocation, decision, yokedPair } from '$lib/server/db/schema';
import { decideForPerson } from '$lib/server/decisions/decide-for-person';
import { replayStoredDecision } from '$lib/server/decisions/replay-stored-decision';
import { loadSigningKey } from '$lib/server/keys/signing-key';
import { storeUpload } from '$lib/server/intake/store-upload';
import { decisionInputsSchema } from '$scheduler/policies/decision-record';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import { createDatabase, type TestDatabase } from '../support/create-database';
import { createPuckProtocol, readPuck } from '../support/puck-protocol';
import { hourMs, plantRunningStudy, type RunningStudy } from '../support/running-study';

/**
 * A person of a yoked arm gets what their master was given, once that is scored (method sheet D5). Files
 * are made of normal trials around a place on the zero-error line, so that nothing waits for quality.
 */

const start = Date.parse('2027-03-08T09:00:00Z');
const puck = createPuckProtocol();
const protocol: ProtocolContent = {
	...puck,
	arms: [
		{ key: 'adaptive', name: 'Adaptive', rule: 'adaptive' },
		{ key: 'yoked', name: 'Yoked', rule: 'yoked', master: 'adaptive' }
	],
	yoking: { leadHours: 20, orphan: 'plain-practice', late: 'wait' }
};
let database: TestDatabase;
let owner: DatabaseHandle;
let app: DatabaseHandle;
let study: RunningStudy;
let nowMs = start;
const clock = { now: () => nowMs };
const decisionOutputSchema = z.object({ parameters: z.object({ region: z.unknown() }) });
const dayMs = 24 * hourMs;
let issue: () => Promise<number>;
const masters = ['Q11', 'Q23'];
const partner = 'Q64';
const ids = new Map<string, string>();
const idOf = (code: string) => ids.get(code) ?? '';

beforeAll(async () => {
	database = await createDatabase();
	owner = openDatabase(database.ownerUrl);
	app = openDatabase(database.appUrl);
	study = await plantRunningStudy(owner.db, protocol, start - dayMs);
	const folder = mkdtempSync(join(tmpdir(), 'ovalry-keys-'));
	const key = await loadSigningKey({
		folder,
		wrappingKey: Buffer.alloc(32, 3).toString('base64url')
	});
	issue = () => issueDueBundles(app.db, { clock, signingKey: async () => key });
	for (const [index, code] of [...masters, partner].entries()) {
		const { id } = await study.enrol(code);
		ids.set(code, id);
		const behind = code === partner ? dayMs : 0;
		for (const visit of [1, 2, 3]) {
			const late = visit > 1 ? behind : 0;
			await study.book(id, visit, start + (visit - 1) * dayMs + late + index * hourMs);
		}
	}
});
afterAll(async () => {
	await Promise.all([owner.end(), app.end()]);
	await database.drop();
});

const services = () => ({
	clock,
	allocate: (...[tx, participantId]: Parameters<ReturnType<RunningStudy['allocateTo']>>) =>
		study.allocateTo(participantId === idOf(partner) ? 'yoked' : 'adaptive')(tx, participantId)
});

async function uploadDay(day: number, codes: readonly string[]) {
	const [header, ...rows] = readPuck('trials.csv').trim().split(/\r?\n/);
	const own = rows.filter((row) => {
		const [code = '', onDay] = row.split(',');
		return onDay === String(day) && codes.includes(code);
	});
	const bytes = new TextEncoder().encode([header, ...own].join('\n'));
	const grant = study.grant('trials:upload');
	const name = `day-${day}-${codes.length}.csv`;
	return storeUpload(app.db, clock, grant, { name, bytes });
}

async function decideAll(): Promise<void> {
	for (const id of ids.values()) await decideForPerson(app.db, services(), id);
}

async function readDecision(code: string, visitNumber: number) {
	const [row] = await owner.db
		.select()
		.from(decision)
		.where(and(eq(decision.participantId, idOf(code)), eq(decision.visitNumber, visitNumber)));
	return row;
}

async function findMaster(): Promise<string> {
	const [pair] = await owner.db.select().from(yokedPair);
	const found = masters.find((code) => idOf(code) === pair?.masterId);
	if (!found) throw new Error('nobody is paired');
	return found;
}

describe('a yoked person', () => {
	it('is not decided before the ready hour, when the masters are', async () => {
		nowMs = start + 8 * hourMs;
		expect(await uploadDay(1, [...masters, partner])).toMatchObject({ ok: true });
		await decideAll();
		const arms = await owner.db.select({ arm: allocation.arm }).from(allocation);
		expect(arms.map(({ arm }) => arm).sort()).toEqual([...['adaptive', 'adaptive', 'yoked']]);
		const decided = await Promise.all(masters.map((code) => readDecision(code, 2)));
		expect(decided.map((found) => found?.kind)).toEqual(['region', 'region']);
		expect(await readDecision(partner, 2)).toBeUndefined();
	});

	it('gets the master’s block of the same place, once that is scored', async () => {
		nowMs = start + dayMs - hourMs;
		await issue();
		nowMs = start + dayMs + 8 * hourMs;
		expect(await uploadDay(2, masters)).toMatchObject({ ok: true });
		await decideAll();
		nowMs = start + 2 * dayMs - 5 * hourMs;
		await decideAll();
		const master = await findMaster();
		const [own, theirs] = [await readDecision(partner, 2), await readDecision(master, 2)];
		expect(own?.code).toBe('YOKED');
		const inputs = decisionInputsSchema.parse(JSON.parse(own?.inputs ?? '{}'));
		if (inputs.rule.kind !== 'yoked') throw new Error('not decided by the rule of a yoked arm');
		expect(inputs.rule.master.code).toBe(master);
		expect(inputs.rule.master.blocks[2]?.scoredAtHours).toBeNull();
		const read = (text = '{}') => decisionOutputSchema.parse(JSON.parse(text));
		expect(own?.kind).toBe('region');
		expect(read(own?.output).parameters.region).toEqual(read(theirs?.output).parameters.region);
	});

	it('is paired with the nearest baseline, once and for all', async () => {
		const pairs = await owner.db.select().from(yokedPair);
		expect(pairs).toHaveLength(1);
		expect(pairs[0]?.participantId).toBe(idOf(partner));
		// NumPy on the first day's file: ½·ln det np.cov(scaled) and mean |error|, over their spreads
		// (ddof 1) of the three: 2.1416518998 to Q11, 1.6871354242 to Q23.
		expect(await findMaster()).toBe('Q23');
		expect(pairs[0]?.distance).toBeCloseTo(1.6871354242, 6);
		await expect(owner.db.update(yokedPair).set({ distance: 0 })).rejects.toThrow();
		await expect(
			app.db.insert(yokedPair).values({ ...pairs[0], participantId: idOf('Q23') } as never)
		).rejects.toThrow();
	});

	it('waits for a master’s block that is late', async () => {
		nowMs = start + 2 * dayMs + 9 * hourMs;
		expect(await uploadDay(2, [partner])).toMatchObject({ ok: true });
		nowMs = start + 3 * dayMs - 8 * hourMs;
		await decideAll();
		const own = await readDecision(partner, 3);
		expect([own?.kind, own?.code, own?.state]).toEqual(['wait', 'LATE-WAIT', 'held']);
	});

	it('replays to the same bytes', async () => {
		const rows = await owner.db.select({ id: decision.id }).from(decision);
		for (const { id } of rows)
			expect(await replayStoredDecision(owner.db, id)).toEqual({ equal: true, sameVersions: true });
	});
});

import { and, eq } from 'drizzle-orm';
import { compactDecrypt, compactVerify, importJWK } from 'jose';
import { mkdtempSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { issueDueBundles } from '$lib/server/bundles/issue-due-bundles';
import { openDatabase, type DatabaseHandle } from '$lib/server/db/client';
import { bundle, decision } from '$lib/server/db/schema';
import { applyDueFallbacks } from '$lib/server/decisions/apply-due-fallbacks';
import { decideDue } from '$lib/server/decisions/decide-due';
import { decideForPerson } from '$lib/server/decisions/decide-for-person';
import { replayStoredDecision } from '$lib/server/decisions/replay-stored-decision';
import { settleDecision } from '$lib/server/decisions/settle-decision';
import { storeUpload } from '$lib/server/intake/store-upload';
import { loadSigningKey } from '$lib/server/keys/signing-key';
import { loadBlockFile } from '$lib/server/visits/load-block-file';
import { createDatabase, type TestDatabase } from '../support/create-database';
import { createPuckProtocol, readPuck } from '../support/puck-protocol';
import { hourMs, plantRunningStudy, type RunningStudy } from '../support/running-study';

const start = Date.parse('2027-03-08T09:00:00Z');
const dayMs = 24 * hourMs;
type ExpectedBlock = { day: number; block: number; decision: { kind: string; code: string } };
const expected = JSON.parse(readPuck('expected.json')) as {
	participants: { participant: string; blocks: ExpectedBlock[] }[];
};
const codes = expected.participants.map((found) => found.participant);

let database: TestDatabase;
let owner: DatabaseHandle;
let app: DatabaseHandle;
let study: RunningStudy;
let nowMs = start;
const clock = { now: () => nowMs };
const ids = new Map<string, string>();

beforeAll(async () => {
	database = await createDatabase();
	owner = openDatabase(database.ownerUrl);
	app = openDatabase(database.appUrl);
	study = await plantRunningStudy(owner.db, createPuckProtocol(), start - dayMs);
	for (const [index, code] of codes.entries()) {
		const { id } = await study.enrol(code);
		ids.set(code, id);
		for (const visit of [1, 2, 3]) {
			await study.book(id, visit, start + (visit - 1) * dayMs + index * hourMs);
		}
	}
});
afterAll(async () => {
	await Promise.all([owner.end(), app.end()]);
	await database.drop();
});

const services = () => ({ clock, allocate: study.allocateTo('adaptive') });

async function uploadDay(day: number) {
	const [header, ...rows] = readPuck('trials.csv').trim().split(/\r?\n/);
	const own = rows.filter((row) => row.split(',')[1] === String(day));
	const bytes = new TextEncoder().encode([header, ...own].join('\n'));
	const grant = study.grant('trials:upload');
	return storeUpload(app.db, clock, grant, { name: `day-${day}.csv`, bytes });
}

async function readDecision(code: string, visitNumber: number) {
	const [row] = await owner.db
		.select()
		.from(decision)
		.where(
			and(eq(decision.participantId, ids.get(code) ?? ''), eq(decision.visitNumber, visitNumber))
		);
	if (!row) throw new Error(`no decision for ${code}, visit ${visitNumber}`);
	return row;
}

describe('the way from trials to the next block', () => {
	it('decides the baseline block of everybody at its ready hour', async () => {
		nowMs = start - 6 * hourMs;
		await decideDue(app.db, services());
		const baseline = await readDecision('Q11', 1);
		expect([baseline.kind, baseline.code, baseline.state]).toEqual([
			'baseline',
			'PROTOCOL-BLOCK',
			'automatic'
		]);
	});

	it('stores the baseline file once and decides each next block as expected', async () => {
		nowMs = start + 8 * hourMs;
		expect(await uploadDay(1)).toMatchObject({ ok: true, trialCount: 360 });
		expect(await uploadDay(1)).toEqual({ ok: false, reason: 'same-file' });
		for (const code of codes) await decideForPerson(app.db, services(), ids.get(code) ?? '');
		for (const { participant: code, blocks } of expected.participants) {
			const found = await readDecision(code, 2);
			expect([code, found.kind, found.code]).toEqual([
				code,
				blocks[0]?.decision.kind,
				blocks[0]?.decision.code
			]);
		}
	});

	it('decides once, however often it is asked', async () => {
		expect(await decideForPerson(app.db, services(), ids.get('Q11') ?? '')).toBe(0);
	});

	it('keeps the ready hour twelve hours before the visit', async () => {
		const found = await readDecision('Q11', 2);
		expect(found.readyAt?.getTime()).toBe(start + dayMs - 12 * hourMs);
	});

	it('replays each decision to the same bytes from the raw file', async () => {
		const rows = await owner.db.select({ id: decision.id }).from(decision);
		expect(rows.length).toBeGreaterThanOrEqual(12);
		for (const { id } of rows)
			expect(await replayStoredDecision(owner.db, id)).toEqual({ equal: true, sameVersions: true });
	});

	it('goes on from the memory of the block before', async () => {
		nowMs = start + dayMs + 8 * hourMs;
		await applyDueFallbacks(app.db, clock);
		expect(await uploadDay(2)).toMatchObject({ ok: true });
		for (const code of codes) await decideForPerson(app.db, services(), ids.get(code) ?? '');
		for (const { participant: code, blocks } of expected.participants) {
			const second = blocks[1];
			if (!second) continue;
			const found = await readDecision(code, 3);
			expect([code, found.kind, found.code]).toEqual([
				code,
				second.decision.kind,
				second.decision.code
			]);
		}
	});
});

describe('a block for its rig', () => {
	it('is not there before its ready hour, and is signed, encrypted and of one size after', async () => {
		const folder = mkdtempSync(join(tmpdir(), 'ovalry-keys-'));
		const key = await loadSigningKey({
			folder,
			wrappingKey: Buffer.alloc(32, 3).toString('base64url')
		});
		const bundles = { clock, signingKey: async () => key };
		nowMs = start + 2 * dayMs - 13 * hourMs;
		await issueDueBundles(app.db, bundles);
		const found = await readDecision('Q11', 3);
		const before = await owner.db.select().from(bundle).where(eq(bundle.decisionId, found.id));
		expect(before).toHaveLength(0);
		nowMs = start + 2 * dayMs - 11 * hourMs;
		expect(await issueDueBundles(app.db, bundles)).toBeGreaterThan(0);
		const rows = await owner.db.select().from(bundle);
		expect(new Set(rows.map((row) => row.content.length)).size).toBe(1);
		const own = rows.find((row) => row.decisionId === found.id);
		expect(own?.fileName).toBe('Q11-visit-3-block-1.jwe');
		const opened = await compactDecrypt(
			own?.content ?? new Uint8Array(),
			await importJWK(study.rigPrivateKey, 'ECDH-ES')
		);
		const verified = await compactVerify(opened.plaintext, await importJWK(key.publicJwk, 'EdDSA'));
		const content = JSON.parse(new TextDecoder().decode(verified.payload)) as {
			participant: string;
			plan: { kind: string };
		};
		expect([content.participant, content.plan.kind]).toEqual(['Q11', found.kind]);
	});

	it('can be fetched by the operator of its study only while it is ready', async () => {
		const [visit] = await owner.db.query.booking.findMany({
			where: (table, { and: both, eq: same }) =>
				both(same(table.participantId, ids.get('Q11') ?? ''), same(table.visitNumber, 3))
		});
		const place = { bookingId: visit?.id ?? '', blockNumber: 1 };
		const grant = study.grant('bundle:fetch');
		expect(await loadBlockFile(app.db, clock, grant, place)).toMatchObject({
			fileName: 'Q11-visit-3-block-1.jwe'
		});
		const elsewhere = { ...grant, studyId: study.lab.id };
		expect(await loadBlockFile(app.db, clock, elsewhere, place)).toBeNull();
		const earlier = { now: () => start + 2 * dayMs - 13 * hourMs };
		expect(await loadBlockFile(app.db, earlier, grant, place)).toBeNull();
	});
});

type LooseInputs = {
	state: { last: { trials: [number, number][] }; memory: { suspect: number } };
	protocol: { settle: { margin: number } };
};

describe('replay after something was altered', () => {
	async function alter(change: (inputs: Record<string, never>) => void) {
		const row = await readDecision('Q11', 2);
		const inputs = JSON.parse(row.inputs) as Record<string, never>;
		change(inputs);
		await owner.db.transaction(async (tx) => {
			await tx.execute('alter table decision disable trigger decision_fixed');
			await tx
				.update(decision)
				.set({ inputs: JSON.stringify(inputs) })
				.where(eq(decision.id, row.id));
		});
		const verdict = await replayStoredDecision(owner.db, row.id);
		await owner.db.update(decision).set({ inputs: row.inputs }).where(eq(decision.id, row.id));
		return verdict;
	}

	it.each([
		[
			'one trial',
			(inputs: LooseInputs) => inputs.state.last.trials.splice(3, 1, [2.5, 0.25]),
			'trial 4, release_speed'
		],
		[
			'one policy number',
			(inputs: LooseInputs) => (inputs.protocol.settle.margin = 0.6),
			'policy setting settle.margin'
		],
		[
			'one memory field',
			(inputs: LooseInputs) => (inputs.state.memory.suspect = 1),
			'memory suspect'
		]
	])('names %s', async (_, change, name) => {
		const verdict = await alter(change as never);
		expect(verdict).toMatchObject({ equal: false, name });
	});
});

describe('a held decision', () => {
	it('is settled once, with a reason where it is changed', async () => {
		const held = await readDecision('Q37', 3).catch(() => null);
		const any = held ?? (await readDecision('Q11', 3));
		await owner.db.transaction(async (tx) => {
			await tx.execute('alter table decision disable trigger decision_fixed');
			await tx
				.update(decision)
				.set({ state: 'held', readyAt: new Date(nowMs + hourMs) })
				.where(eq(decision.id, any.id));
		});
		const grant = study.grant('decision:settle');
		const input = {
			action: 'plain-practice' as const,
			reason: 'The rig was recalibrated today.',
			sizePercent: 100
		};
		expect(await settleDecision(app.db, clock, grant, { decisionId: any.id, input })).toEqual({
			ok: true
		});
		expect(await settleDecision(app.db, clock, grant, { decisionId: any.id, input })).toEqual({
			ok: false,
			reason: 'not-held'
		});
	});
});

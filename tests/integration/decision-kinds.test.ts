import { mkdtempSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { decideNextBlock } from '$scheduler/policies/decide';
import { decisionInputsSchema, type ArmRule } from '$scheduler/policies/decision-record';
import { issueDueBundles } from '$lib/server/bundles/issue-due-bundles';
import { openDatabase, type DatabaseHandle } from '$lib/server/db/client';
import { bundle, decision } from '$lib/server/db/schema';
import { applyDueFallbacks } from '$lib/server/decisions/apply-due-fallbacks';
import { decideDue } from '$lib/server/decisions/decide-due';
import { findEffectiveBlock } from '$lib/server/decisions/effective-block';
import { findHoldReasons } from '$lib/server/decisions/find-hold-reasons';
import { loadDecisionCard } from '$lib/server/decisions/load-decision-card';
import { loadDecisionWithSettlement } from '$lib/server/decisions/load-decision';
import { settleDecision } from '$lib/server/decisions/settle-decision';
import { loadSigningKey } from '$lib/server/keys/signing-key';
import { canonicalJson, sha256Hex } from '$lib/server/record/canonical-json';
import { createDatabase, type TestDatabase } from '../support/create-database';
import { createPuckProtocol } from '../support/puck-protocol';
import { hourMs, plantRunningStudy, type RunningStudy } from '../support/running-study';

/** A block that waits for a yoked partner has no trials of its own: it is held, settled or falls back. */

const start = Date.parse('2027-03-08T09:00:00Z');
const protocol = createPuckProtocol();
let database: TestDatabase;
let owner: DatabaseHandle;
let app: DatabaseHandle;
let study: RunningStudy;
let issue: () => Promise<number>;
let nowMs = start - 13 * hourMs;
const clock = { now: () => nowMs };

beforeAll(async () => {
	database = await createDatabase();
	owner = openDatabase(database.ownerUrl);
	app = openDatabase(database.appUrl);
	study = await plantRunningStudy(owner.db, protocol, nowMs - 24 * hourMs);
	const folder = mkdtempSync(join(tmpdir(), 'ovalry-keys-'));
	const wrappingKey = Buffer.alloc(32, 3).toString('base64url');
	const key = await loadSigningKey({ folder, wrappingKey });
	issue = () => issueDueBundles(app.db, { clock, signingKey: async () => key });
});
afterAll(async () => {
	await Promise.all([owner.end(), app.end()]);
	await database.drop();
});

const lateMaster: ArmRule = {
	...{ kind: 'yoked', block: 0, nowHours: 30, previousEndHours: 20, gapMaxHours: 28, pool: [] },
	settings: { leadHours: 20, orphan: 'plain-practice', late: 'wait' },
	master: { code: 'P07', withdrawn: false, blocks: [] }
};

/** A decision for the person's second visit as a yoked arm with a late master makes it. */
async function plantWait(code: string, hour: number): Promise<string> {
	const { id } = await study.enrol(code);
	for (const visit of [1, 2]) await study.book(id, visit, start + (visit + hour) * hourMs);
	nowMs = start - 11 * hourMs + hour * hourMs;
	await decideDue(app.db, { clock, allocate: async () => false });
	const [made] = await owner.db.select().from(decision).where(eq(decision.participantId, id));
	if (!made) throw new Error('nothing was decided');
	const inputs = decisionInputsSchema.parse(JSON.parse(made.inputs));
	const { engineVersion, runtimeVersion, policyHash } = made;
	const { inputs: written, ...output } = decideNextBlock({
		...inputs,
		rule: lateMaster,
		versions: { engineVersion, runtimeVersion, policyHash },
		digest: sha256Hex
	});
	const why = output.reasons[0]?.code ?? '';
	const choice = { kind: output.kind, code: why, coverShare: null, reachSd: null };
	const { id: _first, ...place } = made;
	const [planted] = await owner.db
		.insert(decision)
		.values({
			...place,
			visitNumber: 2,
			inputs: canonicalJson(written),
			output: canonicalJson(output),
			kind: output.kind,
			code: why,
			holdReasons: findHoldReasons(choice, protocol.guardRails),
			state: 'held',
			readyAt: new Date(nowMs + hourMs)
		})
		.returning({ id: decision.id });
	if (!planted) throw new Error('nothing was planted');
	return planted.id;
}

async function listFiles(decisionId: string) {
	return owner.db.select().from(bundle).where(eq(bundle.decisionId, decisionId));
}

describe('a decision to wait for the yoked partner', () => {
	it('is shown in words, is never issued, and has no block that could be used', async () => {
		const decisionId = await plantWait('W01', 0);
		const grant = study.grant('decision:settle');
		const read = study.grant('decision:read');
		const card = await loadDecisionCard(app.db, clock, read, decisionId);
		expect(card?.kindWords).toBe('wait for the yoked partner’s block');
		expect(card?.explained.reasons[0]?.text).toMatch(/^The master’s block 1 is not scored yet/);
		expect(card?.holdReasons).toEqual([{ code: 'LATE-WAIT', values: {} }]);
		expect(card?.effective).toBeNull();
		await issue();
		expect(await listFiles(decisionId)).toEqual([]);
		const input = { action: 'use', reason: '', sizePercent: 100 } as const;
		const settled = await settleDecision(app.db, clock, grant, { decisionId, input });
		expect(settled).toEqual({ ok: false, reason: 'nothing-to-use' });
	});

	it('runs plain practice of the protocol’s length once its ready hour has come', async () => {
		const decisionId = await plantWait('W02', 2);
		nowMs += 2 * hourMs;
		expect(await applyDueFallbacks(app.db, clock)).toBeGreaterThan(0);
		const where = { decisionId, studyId: study.grant('decision:read').studyId };
		const decided = await app.db.transaction((tx) => loadDecisionWithSettlement(tx, where));
		const block = decided && findEffectiveBlock(decided);
		expect(block).toEqual({ kind: 'practice', parameters: { trials: 60 } });
		await issue();
		expect(await listFiles(decisionId)).toHaveLength(1);
	});
});

import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { eq } from 'drizzle-orm';
import { openDatabase, type DatabaseHandle } from '$lib/server/db/client';
import { decision, participant, protocolVersion } from '$lib/server/db/schema';
import { canonicalJson } from '$lib/server/record/canonical-json';
import { describeKind, hasBlockToRun } from '$lib/decisions/kind-words';
import { DECISION_KINDS, type DecisionKind } from '$scheduler/policies/policy-memory';
import { startApp, type AppServer } from '../support/app-server';
import { openBrowser, type Screen, type TestBrowser } from '../support/browser';
import { lookClosely } from '../support/look-closely';
import { makeDecision } from '../support/make-decision';

/**
 * The decision page of the built application for every kind that the engine can name. Each record is the
 * engine's own and stands in the database as the application stores it, one place of a participant each.
 */

let app: AppServer;
let browser: TestBrowser;
let screen: Screen;
let owner: DatabaseHandle;
let place: { studyId: string; participantId: string; protocolHash: string };

beforeAll(async () => {
	[app, browser] = await Promise.all([startApp('demo'), openBrowser()]);
	const approver = app.people.find(({ role }) => role === 'approver');
	screen = await browser.openScreen();
	await screen.page.goto(`${app.origin}/demo`);
	await screen.page.getByRole('button', { name: `Enter as ${approver?.name}` }).click();
	await screen.page.waitForURL((url) => url.pathname !== '/demo');
	owner = openDatabase(app.database.ownerUrl, { max: 1 });
	const [row] = await owner.db
		.select({
			studyId: participant.studyId,
			participantId: participant.id,
			protocolHash: protocolVersion.hash
		})
		.from(participant)
		.innerJoin(protocolVersion, eq(protocolVersion.id, participant.protocolVersionId))
		.orderBy(participant.code)
		.limit(1);
	if (!row?.protocolHash) throw new Error('the demo has no participant');
	place = { ...row, protocolHash: row.protocolHash };
});
afterAll(async () => {
	await owner?.end();
	await browser?.close();
	await app?.stop();
});

/** Stores the record at a place of its own and gives its id. */
async function store(kind: DecisionKind, blockNumber: number): Promise<string> {
	const { inputs, ...output } = makeDecision(kind);
	const { engineVersion, runtimeVersion, inputsDigest } = output;
	const code = output.reasons[0]?.code ?? '';
	const isHeld = !hasBlockToRun(kind);
	const [row] = await owner.db
		.insert(decision)
		.values({
			...{ ...place, visitNumber: 20, blockNumber, policyHash: 'planted', kind, code },
			...{ engineVersion, runtimeVersion, inputsDigest },
			inputs: canonicalJson(inputs),
			output: canonicalJson(output),
			holdReasons: isHeld ? [{ code, values: {} }] : [],
			state: isHeld ? 'held' : 'automatic',
			decidedAt: new Date()
		})
		.returning({ id: decision.id });
	return row?.id ?? '';
}

describe('the decision page', () => {
	it.each(DECISION_KINDS.map((kind, index) => [kind, index + 1] as const))(
		'of kind %s says what, why and what else was weighed',
		async (kind, blockNumber) => {
			const { page, complaints } = screen;
			const id = await store(kind, blockNumber);
			await page.goto(`${app.origin}/studies/${place.studyId}/decisions/${id}`);
			await page.waitForLoadState('networkidle');
			const text = await page.getByRole('main').innerText();
			expect(text.toLowerCase()).toContain(describeKind(kind).toLowerCase());
			expect(text).toContain('How it was chosen');
			expect(text).not.toMatch(/undefined|NaN|\[object/);
			expect(await lookClosely(page, `decision-${kind}`)).toEqual([]);
			expect(complaints).toEqual([]);
		}
	);
});

import { mkdtempSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { and, eq } from 'drizzle-orm';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { AmendmentTerms } from '$lib/protocol/amendment';
import { findHeldForConsent } from '$lib/server/amendments/held-for-consent';
import { loadAmendmentPlan } from '$lib/server/amendments/load-amendments';
import { loadFollowers } from '$lib/server/amendments/load-followers';
import { moveFollowers } from '$lib/server/amendments/move-followers';
import { issueDueBundles } from '$lib/server/bundles/issue-due-bundles';
import { openDatabase, type DatabaseHandle } from '$lib/server/db/client';
import * as t from '$lib/server/db/schema';
import { decideDue } from '$lib/server/decisions/decide-due';
import { decideForPerson } from '$lib/server/decisions/decide-for-person';
import { replayStoredDecision } from '$lib/server/decisions/replay-stored-decision';
import { storeUpload } from '$lib/server/intake/store-upload';
import { loadSigningKey } from '$lib/server/keys/signing-key';
import { loadRunningVersion } from '$lib/server/studies/load-gates';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import { createDatabase, type TestDatabase } from '../support/create-database';
import { plantAmendment } from '../support/plant-amendment';
import { createPuckProtocol, readPuck } from '../support/puck-protocol';
import { hourMs, plantRunningStudy, type RunningStudy } from '../support/running-study';

/** Baseline on 8 March, practice on 9 and 10 March; the amendment takes effect on the 9th. */
const start = Date.parse('2027-03-08T09:00:00Z');
const dayMs = 24 * hourMs;
const effective = Date.parse('2027-03-09T00:01:00Z');
const codes = ['Q11', 'Q23'];

let database: TestDatabase;
let owner: DatabaseHandle;
let app: DatabaseHandle;
let study: RunningStudy;
let nowMs = start;
const clock = { now: () => nowMs };
const ids = new Map<string, string>();

const terms: AmendmentTerms = {
	effectiveOn: '2027-03-09',
	follows: 'in-flight',
	renewal: 'visits-to-come',
	withoutRenewal: 'stays'
};

beforeAll(async () => {
	database = await createDatabase();
	owner = openDatabase(database.ownerUrl);
	app = openDatabase(database.appUrl);
});
afterAll(async () => {
	await Promise.all([owner.end(), app.end()]);
	await database.drop();
});
beforeEach(async () => {
	nowMs = start - dayMs;
	study = await plantRunningStudy(owner.db, createPuckProtocol(), nowMs);
	for (const [index, code] of codes.entries()) {
		const { id } = await study.enrol(code);
		ids.set(code, id);
		for (const visit of [1, 2, 3]) {
			await study.book(id, visit, start + (visit - 1) * dayMs + index * hourMs);
		}
	}
});

const services = () => ({ clock, allocate: study.allocateTo('adaptive') });
const idOf = (code: string) => ids.get(code) ?? '';

function amend(change: Partial<AmendmentTerms> = {}, content: Partial<ProtocolContent> = {}) {
	const next = { ...createPuckProtocol(), consentTextVersion: '2', ...content };
	const input = { content: next, terms: { ...terms, ...change }, atMs: nowMs };
	return plantAmendment(owner.db, study, input);
}

async function sign(code: string) {
	await owner.db.insert(t.consent).values({
		participantId: idOf(code),
		textVersion: '2',
		signedAt: new Date(nowMs),
		recordedBy: study.person.id,
		recordedAt: new Date(nowMs)
	});
}

async function runDay(day: number) {
	const [header, ...rows] = readPuck('trials.csv').trim().split(/\r?\n/);
	const own = rows.filter((row) => row.split(',')[1] === String(day));
	const ofStudy = own.filter((row) => codes.includes(row.split(',')[0] ?? ''));
	const bytes = new TextEncoder().encode([header, ...ofStudy].join('\n'));
	const grant = study.grant('trials:upload');
	const file = { name: `day-${day}.csv`, bytes };
	expect(await storeUpload(app.db, clock, grant, file)).toMatchObject({ ok: true });
	for (const code of codes) await decideForPerson(app.db, services(), idOf(code));
}

async function statesNow() {
	const plan = await loadAmendmentPlan(app.db, clock, { studyId: study.study.id, number: 2 });
	if (!plan) throw new Error('there is no amendment');
	const rows = await loadFollowers(app.db, clock, plan, { studyId: study.study.id });
	return Object.fromEntries(rows.map(({ code, state }) => [code, state]));
}

async function hashOf(code: string, visitNumber: number) {
	const [row] = await owner.db
		.select({ hash: t.decision.protocolHash })
		.from(t.decision)
		.where(and(eq(t.decision.participantId, idOf(code)), eq(t.decision.visitNumber, visitNumber)));
	return row?.hash;
}

async function moves() {
	const rows = await owner.db
		.select()
		.from(t.recordEvent)
		.where(
			and(eq(t.recordEvent.studyId, study.study.id), eq(t.recordEvent.kind, 'moved-to-version'))
		);
	return rows.map((row) => row.participantId);
}

describe('people in flight', () => {
	it('stay on their version until date and consent, then follow the new one from the next visit', async () => {
		const { hash } = await amend();
		await sign('Q11');
		nowMs = start - 6 * hourMs;
		await decideDue(app.db, services());
		nowMs = start + 8 * hourMs;
		await runDay(1);
		expect(await statesNow()).toEqual({ Q11: 'not-yet', Q23: 'needs-consent' });

		// The date has come; the second visit was decided before it and is run as decided.
		nowMs = effective;
		expect((await loadRunningVersion(app.db, clock, study.study.id))?.number).toBe(2);
		expect(await statesNow()).toEqual({ Q11: 'after-visit', Q23: 'needs-consent' });
		expect(await moveFollowers(app.db, clock)).toBe(0);
		expect(await hashOf('Q11', 2)).toBe(study.version.hash);

		nowMs = start + dayMs + 8 * hourMs;
		await runDay(2);
		expect(await hashOf('Q11', 3)).toBe(hash);
		expect(await hashOf('Q23', 3)).toBe(study.version.hash);
		expect(await statesNow()).toEqual({ Q11: 'follows', Q23: 'needs-consent' });
		expect(await moves()).toEqual([idOf('Q11')]);
	});

	it('are moved by the clock between visits, once, and each move is recorded', async () => {
		await amend();
		await sign('Q11');
		nowMs = effective - hourMs;
		expect(await moveFollowers(app.db, clock)).toBe(0);
		nowMs = effective;
		expect(await moveFollowers(app.db, clock)).toBe(1);
		expect(await moveFollowers(app.db, clock)).toBe(0);
		expect(await moves()).toEqual([idOf('Q11')]);
		await sign('Q23');
		expect(await moveFollowers(app.db, clock)).toBe(1);
	});

	it('are moved once when two workers look at the same moment', async () => {
		await amend({ renewal: 'nobody' });
		nowMs = effective;
		const counts = await Promise.all([moveFollowers(app.db, clock), moveFollowers(app.db, clock)]);
		expect(counts[0] + counts[1]).toBe(2);
		expect((await moves()).toSorted()).toEqual([...ids.values()].toSorted());
	});

	it('stay where the version is not signed off, whatever its date', async () => {
		const { hash } = await amend({ renewal: 'nobody' });
		await owner.db.insert(t.signOff).values({
			studyId: study.study.id,
			protocolHash: hash,
			verdict: 'sent-back',
			assumptions: {},
			personId: study.person.id,
			at: new Date(nowMs + 1)
		});
		nowMs = effective;
		expect(await moveFollowers(app.db, clock)).toBe(0);
		expect(await statesNow()).toEqual({ Q11: 'not-yet', Q23: 'not-yet' });
	});

	it('keep theirs where the amendment is for new people only', async () => {
		await amend({ follows: 'new-people', renewal: 'nobody' });
		nowMs = effective;
		expect(await moveFollowers(app.db, clock)).toBe(0);
		expect(await statesNow()).toEqual({ Q11: 'keeps', Q23: 'keeps' });
	});

	it('keep theirs where booked visits do not fit; who has none follows', async () => {
		const [first, ...rest] = createPuckProtocol().visits;
		const longer = rest.map((visit) => ({
			...visit,
			gapBefore: { minHours: 44, targetHours: 48, maxHours: 52, nightsBetween: 2 }
		}));
		await amend({ renewal: 'nobody' }, { visits: first ? [first, ...longer] : longer });
		const { id } = await study.enrol('Q13');
		nowMs = effective;
		expect(await statesNow()).toEqual({ Q11: 'chain-differs', Q23: 'chain-differs', Q13: 'due' });
		expect(await moveFollowers(app.db, clock)).toBe(1);
		expect(await moves()).toEqual([id]);
	});

	it('are not moved when they have left', async () => {
		await amend({ renewal: 'nobody' });
		const change = { state: 'withdrawn', withdrawnAt: new Date(nowMs) } as const;
		await owner.db
			.update(t.participant)
			.set(change)
			.where(eq(t.participant.id, idOf('Q11')));
		nowMs = effective;
		expect(await statesNow()).toEqual({ Q11: 'over', Q23: 'due' });
	});

	it('have decisions of either version that replay to the same bytes', async () => {
		const { hash } = await amend(
			{ renewal: 'nobody' },
			{ guardRails: { automaticCoverMax: 0.2, automaticReachSdMax: 3, fallback: 'practice' } }
		);
		nowMs = start - 6 * hourMs;
		await decideDue(app.db, services());
		nowMs = start + 8 * hourMs;
		await runDay(1);
		nowMs = start + dayMs + 8 * hourMs;
		await runDay(2);
		const rows = await owner.db
			.select()
			.from(t.decision)
			.where(eq(t.decision.studyId, study.study.id));
		expect(new Set(rows.map(({ protocolHash }) => protocolHash))).toEqual(
			new Set([study.version.hash, hash])
		);
		for (const { id } of rows) {
			const verdict = await replayStoredDecision(owner.db, id);
			expect(verdict).toEqual({ equal: true, sameVersions: true });
		}
	});
});

describe('an amendment that stops people without the new consent', () => {
	it('issues nothing for them until they sign', async () => {
		await amend({ withoutRenewal: 'stops' });
		const folder = mkdtempSync(join(tmpdir(), 'ovalry-keys-'));
		const wrappingKey = Buffer.alloc(32, 3).toString('base64url');
		const key = await loadSigningKey({ folder, wrappingKey });
		const issued = async () => {
			await decideDue(app.db, services());
			await issueDueBundles(app.db, { clock, signingKey: async () => key });
			const rows = await owner.db
				.select({ participantId: t.bundle.participantId })
				.from(t.bundle)
				.where(eq(t.bundle.studyId, study.study.id));
			return rows.map(({ participantId }) => participantId);
		};
		const person = await study.enrol('Q13');
		ids.set('Q13', person.id);
		await study.book(person.id, 1, start + dayMs + 5 * hourMs);
		nowMs = effective + 8 * hourMs;
		const who = { studyId: study.study.id, participantId: idOf('Q13') };
		expect(await findHeldForConsent(app.db, clock, who)).toMatchObject([{ code: 'Q13' }]);
		expect(await issued()).not.toContain(idOf('Q13'));
		await sign('Q13');
		expect(await findHeldForConsent(app.db, clock, who)).toEqual([]);
		expect(await issued()).toContain(idOf('Q13'));
	});
});

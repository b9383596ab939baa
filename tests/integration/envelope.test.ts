import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openDatabase, type DatabaseHandle } from '$lib/server/db/client';
import * as t from '$lib/server/db/schema';
import type { StudyRole } from '$lib/server/db/schema';
import { decideDue } from '$lib/server/decisions/decide-due';
import { checkEnvelopes } from '$lib/server/envelope/check-envelopes';
import { loadEnvelope } from '$lib/server/envelope/load-envelope';
import { loadWaiting } from '$lib/server/waiting/load-waiting';
import { createDatabase, type TestDatabase } from '../support/create-database';
import { plantMember } from '../support/planted-study';
import { createPuckProtocol } from '../support/puck-protocol';
import { hourMs, plantRunningStudy, type RunningStudy } from '../support/running-study';

const start = Date.parse('2027-03-08T09:00:00Z');
let database: TestDatabase;
let owner: DatabaseHandle;
let app: DatabaseHandle;
let study: RunningStudy;
let nowMs = start - 2 * hourMs;
const clock = { now: () => nowMs };

beforeAll(async () => {
	database = await createDatabase();
	owner = openDatabase(database.ownerUrl);
	app = openDatabase(database.appUrl);
	study = await plantRunningStudy(owner.db, createPuckProtocol(), start - 24 * hourMs);
	const person = await study.enrol('Q11');
	await study.book(person.id, 1, start);
	await decideDue(app.db, { clock, allocate: async () => false });
});
afterAll(async () => {
	await Promise.all([owner.end(), app.end()]);
	await database.drop();
});

function hire(role: StudyRole) {
	const ids = { studyId: study.study.id, labId: study.lab.id, ownerId: study.person.id };
	return plantMember(owner.db, ids as Parameters<typeof plantMember>[1], role);
}

async function breachesSeenBy(role: StudyRole) {
	const member = await hire(role);
	const { content, hash } = study.version;
	const grant = await member.grantFor('protocol:read');
	const found = await loadEnvelope(app.db, grant, { content, hash: hash ?? '' });
	const items = await loadWaiting(app.db, clock, await member.grantFor('today:read'));
	return {
		numbers: found !== null,
		count: found?.breaches?.count ?? null,
		waits: items.filter(({ kind }) => kind === 'breach').map(({ title }) => title)
	};
}

/** A decision as no code of ours writes it: a region that catches nearly everything. */
async function plantBreach() {
	const [row] = await owner.db
		.select()
		.from(t.decision)
		.where(eq(t.decision.studyId, study.study.id));
	if (!row) throw new Error('nothing was decided');
	const { id: _, ...like } = row;
	const region = {
		center: [0, 0],
		shape: [
			[1, 0],
			[0, 1]
		],
		share: 0.97,
		stay: 0
	};
	await owner.db.insert(t.decision).values({
		...like,
		visitNumber: 2,
		code: 'REGION-PLACED',
		kind: 'region',
		output: JSON.stringify({ kind: 'region', parameters: { trials: 60, region } })
	});
}

describe('the approved envelope', () => {
	it('is held against every decision, and finds nothing in what the rule decided', async () => {
		expect(await checkEnvelopes(app.db, clock)).toBe(1);
		expect(await checkEnvelopes(app.db, clock)).toBe(0);
		expect(await breachesSeenBy('monitor')).toEqual({ numbers: true, count: 0, waits: [] });
	});

	it('counts a breach and lets it wait for approver and monitor', async () => {
		await plantBreach();
		nowMs += 60_000;
		expect(await checkEnvelopes(app.db, clock)).toBe(1);
		const waits = ['1 block lies outside the approved envelope'];
		for (const role of ['monitor', 'approver'] as const) {
			expect(await breachesSeenBy(role)).toEqual({ numbers: true, count: 1, waits });
		}
	});

	it('shows blinded designers the numbers, not what happens, and others neither', async () => {
		for (const role of ['investigator', 'statistician'] as const) {
			expect(await breachesSeenBy(role)).toEqual({ numbers: true, count: null, waits: [] });
		}
		for (const role of ['coordinator', 'operator'] as const) {
			expect(await breachesSeenBy(role)).toEqual({ numbers: false, count: null, waits: [] });
		}
	});
});

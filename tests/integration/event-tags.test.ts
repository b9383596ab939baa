import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openDatabase, type DatabaseHandle } from '$lib/server/db/client';
import { loadEventTags } from '$lib/server/record/load-event-tags';
import { loadRecord } from '$lib/server/record/load-record';
import { recordEvent } from '$lib/server/record/record-event';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import { createDatabase, type TestDatabase } from '../support/create-database';
import { createPuckProtocol } from '../support/puck-protocol';
import { hourMs, plantRunningStudy, type RunningStudy } from '../support/running-study';

/** What the record's events count as, where the protocol declares an estimand (ICH E9 R1). */

const start = Date.parse('2027-03-08T09:00:00Z');
const clock = { now: () => start };
const protocol: ProtocolContent = {
	...createPuckProtocol(),
	analysis: {
		outcomes: [],
		estimand: {
			...{ population: 'everybody', treatment: 'practice', variable: 'error', summary: 'mean' },
			events: [{ event: 'missed-practice-day', strategy: 'treatment-policy' }]
		},
		...{ analysis: '', exclusions: '', stoppingRules: '', interimLooks: [] }
	}
};
let database: TestDatabase;
let owner: DatabaseHandle;
let app: DatabaseHandle;
let study: RunningStudy;
let missing: string;

beforeAll(async () => {
	database = await createDatabase();
	owner = openDatabase(database.ownerUrl);
	app = openDatabase(database.appUrl);
	study = await plantRunningStudy(owner.db, protocol, start - 24 * hourMs);
	missing = (await study.enrol('P01')).id;
	for (const visitNumber of [1, 2]) {
		await app.db.transaction((tx) =>
			recordEvent(
				tx,
				clock,
				{ kind: 'system' },
				{
					...{ kind: 'visit-missed', item: 'booking', studyId: study.study.id },
					...{ participantId: missing, body: { visitNumber } }
				}
			)
		);
	}
});
afterAll(async () => {
	await Promise.all([owner.end(), app.end()]);
	await database.drop();
});

describe('an event of the record', () => {
	it('counts as what the estimand declares: a missed practice day, not a missed baseline', async () => {
		const tags = await loadEventTags(app.db, [missing]);
		expect([...tags.values()]).toEqual([expect.stringMatching(/, treatment policy$/)]);
	});

	it('shows it on its page', async () => {
		const record = await loadRecord(app.db, study.grant('record:read'), { before: null });
		expect(record.rows.filter(({ countsAs }) => countsAs !== null)).toHaveLength(1);
	});
});

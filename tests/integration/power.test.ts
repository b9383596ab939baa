import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openDatabase, type DatabaseHandle } from '$lib/server/db/client';
import { recordEvent, signOff } from '$lib/server/db/schema';
import { loadPower } from '$lib/server/power/load-power';
import { signOffVersion } from '$lib/server/power/sign-off-version';
import { writeVersionScript } from '$lib/server/power/write-version-script';
import { createDatabase, type TestDatabase } from '../support/create-database';
import {
	finishedDraft,
	freezeDraft,
	plantColleague,
	plantNewStudy,
	plantRole,
	type TeamMember
} from '../support/plant-team';
import { createTestClock, plantLab } from '../support/planted-study';

let database: TestDatabase;
let handle: DatabaseHandle;
const clock = createTestClock();
let studyId: string;
let hash: string;
let statistician: TeamMember;

beforeAll(async () => {
	database = await createDatabase();
	handle = openDatabase(database.appUrl);
	const { labId } = await plantLab(handle.db);
	const made = await plantNewStudy(handle.db, clock, { labId });
	studyId = made.studyId;
	({ hash } = await freezeDraft(handle.db, clock, made.investigator, finishedDraft()));
	const noor = await plantColleague(handle.db, labId, 'Noor Haddad');
	const givenBy = made.investigator.personId;
	await plantRole(handle.db, { studyId, personId: noor.personId, role: 'statistician', givenBy });
	statistician = noor.inStudy(studyId);
});
afterAll(async () => {
	await handle.end();
	await database.drop();
});

const say = async (verdict: 'signed' | 'sent-back', comment = '') => {
	clock.set(clock.now() + 60_000);
	const grant = await statistician.grantFor('power:sign');
	return signOffVersion(handle.db, clock, grant, { protocolHash: hash, verdict, comment });
};

describe('a sign-off', () => {
	it('keeps the assumptions and the numbers that were signed', async () => {
		expect(await say('signed')).toEqual({ ok: true, versionNumber: 1 });
		const [row] = await handle.db.select().from(signOff).where(eq(signOff.studyId, studyId));
		expect(row?.assumptions).toMatchObject({
			comparison: { effectD: 0.8, peoplePerArm: 30 },
			method: 'two-sample t, noncentral t'
		});
		const power = (row?.assumptions as { power: { key: string; power: number }[] }).power;
		expect(power[0]?.power).toBeCloseTo(0.86142, 4);
	});

	it('is followed by later words on the same hash, the newest first', async () => {
		await say('sent-back', 'The effect needs another source.');
		const grant = await statistician.grantFor('power:read');
		const loaded = await loadPower(handle.db, grant);
		expect(loaded?.verdicts.map(({ verdict, by }) => [verdict, by])).toEqual([
			['sent-back', 'Noor Haddad'],
			['signed', 'Noor Haddad']
		]);
	});

	it('is refused for a hash that the study does not have', async () => {
		const grant = await statistician.grantFor('power:sign');
		const input = { protocolHash: 'f'.repeat(64), verdict: 'signed' as const, comment: '' };
		expect(await signOffVersion(handle.db, clock, grant, input)).toEqual({
			ok: false,
			reason: 'unknown-version'
		});
	});

	it('is recorded without its comment', async () => {
		const events = await handle.db
			.select()
			.from(recordEvent)
			.where(eq(recordEvent.studyId, studyId));
		const sent = events.find(({ kind }) => kind === 'version-sent-back');
		expect(sent?.item).toBe('protocol-text');
		expect(sent?.body).not.toContain('another source');
	});
});

describe('the R script', () => {
	it('names the hash and every closed-form number', async () => {
		const grant = await statistician.grantFor('power:read');
		const script = await writeVersionScript(handle.db, grant, { number: 1 });
		expect(script?.fileName).toBe('power-version-1.R');
		expect(script?.text).toContain(hash);
		expect(script?.text).toContain('power_t(d, n1, n2, alpha, sides), 0.861422');
	});

	it('does not exist for a version that does not', async () => {
		const grant = await statistician.grantFor('power:read');
		expect(await writeVersionScript(handle.db, grant, { number: 9 })).toBeNull();
	});
});

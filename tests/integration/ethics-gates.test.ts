import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { AmendmentTerms } from '$lib/protocol/amendment';
import { openDatabase, type DatabaseHandle } from '$lib/server/db/client';
import { study, type StudyRole } from '$lib/server/db/schema';
import { sealVersion } from '$lib/server/allocation/seal-version';
import { listApprovals } from '$lib/server/ethics/list-approvals';
import { recordApproval } from '$lib/server/ethics/record-approval';
import { revokeApproval } from '$lib/server/ethics/revoke-approval';
import { pauseStudy } from '$lib/server/pauses/pause-study';
import { signOffVersion } from '$lib/server/power/sign-off-version';
import { freezeVersion } from '$lib/server/protocols/freeze-version';
import { loadDraft } from '$lib/server/protocols/load-draft';
import { saveDraft } from '$lib/server/protocols/save-draft';
import { startDraft } from '$lib/server/protocols/start-draft';
import { findMissingGates, loadRunningVersion } from '$lib/server/studies/load-gates';
import { createDatabase, type TestDatabase } from '../support/create-database';
import {
	finishedDraft,
	freezeDraft,
	plantColleague,
	plantNewStudy,
	plantRole,
	type TeamMember
} from '../support/plant-team';
import { createTestClock, plantedNowMs, plantLab } from '../support/planted-study';

const dayMs = 86_400_000;
const settings = { OVALRY_ALLOCATION_KEY: Buffer.alloc(32, 7).toString('base64url') };

let database: TestDatabase;
let handle: DatabaseHandle;
const clock = createTestClock();
let labId: string;
let studyId: string;
let investigator: TeamMember;
let statistician: TeamMember;
let unblinded: TeamMember;
let prefixes = 0;

beforeAll(async () => {
	database = await createDatabase();
	handle = openDatabase(database.appUrl);
	({ labId } = await plantLab(handle.db));
});
afterAll(async () => {
	await handle.end();
	await database.drop();
});
beforeEach(async () => {
	clock.set(plantedNowMs);
	const codePrefix = `G${String.fromCharCode(65 + prefixes++)}`;
	({ studyId, investigator } = await plantNewStudy(handle.db, clock, { labId, codePrefix }));
	statistician = await hire('statistician');
	unblinded = await hire('unblinded-statistician');
});

async function hire(role: StudyRole): Promise<TeamMember> {
	const colleague = await plantColleague(handle.db, labId, `Some ${role}`);
	const second = await plantColleague(handle.db, labId, 'Second Person');
	const confirmed = role === 'unblinded-statistician' ? { confirmedBy: second.personId } : {};
	const givenBy = investigator.personId;
	const { personId } = colleague;
	await plantRole(handle.db, { studyId, personId, role, givenBy, ...confirmed });
	return colleague.inStudy(studyId);
}

const freeze = (draft = finishedDraft()) => freezeDraft(handle.db, clock, investigator, draft);
async function sign(protocolHash: string, verdict: 'signed' | 'sent-back' = 'signed') {
	clock.set(clock.now() + 1000);
	const grant = await statistician.grantFor('power:sign');
	await signOffVersion(handle.db, clock, grant, { protocolHash, verdict, comment: 'said so' });
}
async function approve(protocolHash: string, expiresOn = '2028-03-01') {
	const grant = await investigator.grantFor('ethics:record');
	const letter = { board: 'Board of Tidewater', reference: 'E-27/1', approvedOn: '2027-02-01' };
	return recordApproval(handle.db, clock, grant, { ...letter, protocolHash, expiresOn });
}
async function seal(protocolHash: string) {
	const grant = await unblinded.grantFor('allocation:seal');
	const services = { clock, settings };
	return sealVersion(handle.db, services, grant, { protocolHash, blockSizes: [4, 6] });
}
async function missing(): Promise<string[]> {
	const gates = await findMissingGates(handle.db, clock, studyId);
	return gates.map(({ code, whose }) => `${code} ${whose}`);
}

describe('the gates', () => {
	it('name freezing first, then every missing step with whose it is', async () => {
		expect(await missing()).toEqual(['not-frozen investigator']);
		await freeze();
		expect(await missing()).toEqual([
			'not-signed statistician',
			'no-approval investigator',
			'not-sealed unblinded-statistician'
		]);
		expect(await loadRunningVersion(handle.db, clock, studyId)).toBeNull();
	});

	it('open when sign-off, approval and seal name one hash, in any order', async () => {
		const { hash } = await freeze();
		await seal(hash);
		await approve(hash);
		expect(await missing()).toEqual(['not-signed statistician']);
		await sign(hash);
		expect(await missing()).toEqual([]);
		expect(await loadRunningVersion(handle.db, clock, studyId)).toMatchObject({ number: 1, hash });
	});

	it('keep the earlier version running while the next one waits', async () => {
		const { hash } = await freeze();
		await sign(hash);
		await approve(hash);
		await seal(hash);
		await startDraft(handle.db, clock, await investigator.grantFor('protocol:edit'));
		const draft = finishedDraft();
		draft.comparison.peoplePerArm = 40;
		const next = await freeze(draft);
		expect(await loadRunningVersion(handle.db, clock, studyId)).toMatchObject({ number: 1 });
		expect(await missing()).toEqual([]);
		await sign(next.hash);
		await approve(next.hash);
		await seal(next.hash);
		expect(await loadRunningVersion(handle.db, clock, studyId)).toMatchObject({ number: 2 });
	});

	it('close when the statistician takes the sign-off back', async () => {
		const { hash } = await freeze();
		await Promise.all([approve(hash), seal(hash)]);
		await sign(hash);
		await sign(hash, 'sent-back');
		expect(await missing()).toEqual(['not-signed statistician']);
	});

	it('close on the day after an approval ends, in the lab’s zone, and open with its renewal', async () => {
		const { hash } = await freeze();
		await Promise.all([approve(hash, '2027-03-10'), seal(hash)]);
		await sign(hash);
		clock.set(Date.UTC(2027, 2, 10, 23, 59));
		expect(await missing()).toEqual([]);
		clock.set(Date.UTC(2027, 2, 11, 0, 1));
		expect(await missing()).toEqual(['approval-expired investigator']);
		expect(await approve(hash, '2027-06-01')).toMatchObject({ ok: true });
		expect(await missing()).toEqual([]);
	});

	it('close when the board takes its approval back', async () => {
		const { hash } = await freeze();
		await Promise.all([approve(hash), seal(hash)]);
		await sign(hash);
		const grant = await investigator.grantFor('protocol:read');
		const [approval] = await listApprovals(handle.db, clock, grant);
		const record = await investigator.grantFor('ethics:record');
		const approvalId = approval?.id ?? '';
		expect(await revokeApproval(handle.db, clock, record, { approvalId })).toEqual({ ok: true });
		expect(await missing()).toEqual(['no-approval investigator']);
	});

	it('close while the study is paused, and for good when it is closed', async () => {
		const { hash } = await freeze();
		await Promise.all([approve(hash), seal(hash)]);
		await sign(hash);
		await pauseStudy(handle.db, clock, await statistician.grantFor('study:pause'), {
			reason: 'A rig behaved oddly.'
		});
		expect(await missing()).toEqual(['paused investigator']);
		await handle.db
			.update(study)
			.set({ closedAt: new Date(clock.now()) })
			.where(eq(study.id, studyId));
		expect(await missing()).toEqual(['paused investigator', 'closed investigator']);
	});
});

describe('an amendment', () => {
	const terms = { follows: 'in-flight', renewal: 'nobody', withoutRenewal: 'stays' } as const;

	async function freezeNext(amendment: AmendmentTerms, consentTextVersion = '2') {
		const edit = await investigator.grantFor('protocol:edit');
		await startDraft(handle.db, clock, edit);
		const loaded = await loadDraft(handle.db, edit);
		if (!loaded) throw new Error('there is no draft');
		const draft = { ...finishedDraft(), consentTextVersion };
		const { number, revision } = loaded;
		const saved = await saveDraft(handle.db, edit, { number, revision, draft });
		if (!saved.ok) throw new Error(saved.reason);
		const grant = await investigator.grantFor('protocol:freeze');
		const input = { number, revision: saved.revision, reason: 'A clearer text', amendment };
		return freezeVersion(handle.db, clock, grant, input);
	}

	async function open() {
		const { hash } = await freeze();
		await Promise.all([approve(hash), seal(hash)]);
		await sign(hash);
	}

	it('runs from its date on, and the earlier version until then', async () => {
		await open();
		const next = await freezeNext({ ...terms, effectiveOn: '2027-03-10' });
		if (!next.ok) throw new Error(next.reason);
		await Promise.all([approve(next.hash), seal(next.hash)]);
		await sign(next.hash);
		expect(await loadRunningVersion(handle.db, clock, studyId)).toMatchObject({ number: 1 });
		expect(await missing()).toEqual([]);
		clock.set(Date.UTC(2027, 2, 10, 0, 1));
		expect(await loadRunningVersion(handle.db, clock, studyId)).toMatchObject({ number: 2 });
	});

	it('is refused a day that is over, and a renewed consent without a new text', async () => {
		await open();
		const past = await freezeNext({ ...terms, effectiveOn: '2027-03-01' });
		expect(past).toEqual({ ok: false, reason: 'in-the-past' });
		const renewing = { ...terms, renewal: 'everybody', effectiveOn: '2027-03-10' } as const;
		const same = await freezeNext(renewing, '1');
		expect(same).toMatchObject({ ok: false, reason: 'unchanged' });
		const edit = await investigator.grantFor('protocol:edit');
		const loaded = await loadDraft(handle.db, edit);
		const draft = { ...finishedDraft(), readyLeadHours: 6 };
		const { number = 0, revision = 0 } = loaded ?? {};
		await saveDraft(handle.db, edit, { number, revision, draft });
		const grant = await investigator.grantFor('protocol:freeze');
		const input = { number, revision: revision + 1, reason: 'Sooner', amendment: renewing };
		const refused = await freezeVersion(handle.db, clock, grant, input);
		expect(refused).toEqual({ ok: false, reason: 'same-consent-text' });
		expect((await loadDraft(handle.db, edit))?.number).toBe(2);
	});

	it('is refused where no version runs', async () => {
		await freeze();
		const refused = await freezeNext({ ...terms, effectiveOn: '2027-03-10' });
		expect(refused).toEqual({ ok: false, reason: 'nothing-runs' });
	});
});

describe('an ethics approval', () => {
	it('is refused for a hash of another study, before it is given, and after its end', async () => {
		const { hash } = await freeze();
		expect(await approve('a'.repeat(64))).toEqual({ ok: false, reason: 'unknown-version' });
		expect(await approve(hash, '2027-03-01')).toEqual({ ok: false, reason: 'already-expired' });
		clock.set(Date.UTC(2027, 0, 15));
		expect(await approve(hash)).toEqual({ ok: false, reason: 'not-yet-given' });
	});

	it('cannot be recorded by the statistician', async () => {
		await expect(statistician.grantFor('ethics:record')).rejects.toMatchObject({ status: 404 });
	});
});

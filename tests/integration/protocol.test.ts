import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { openDatabase, type DatabaseHandle } from '$lib/server/db/client';
import { protocolVersion, recordEvent, studyRole } from '$lib/server/db/schema';
import { findFrozenVersions } from '$lib/server/protocols/find-versions';
import { freezeVersion } from '$lib/server/protocols/freeze-version';
import { loadDraft } from '$lib/server/protocols/load-draft';
import { loadProtocol } from '$lib/server/protocols/load-protocol';
import { loadRigLimits } from '$lib/server/protocols/load-draft';
import { saveDraft } from '$lib/server/protocols/save-draft';
import { startDraft } from '$lib/server/protocols/start-draft';
import { canonicalJson, sha256Hex } from '$lib/server/record/canonical-json';
import { verifyChain } from '$lib/server/record/verify-chain';
import { createStudy } from '$lib/server/studies/create-study';
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
let labId: string;
let studyId: string;
let investigator: TeamMember;
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
	const codePrefix = `A${String.fromCharCode(65 + prefixes++)}`;
	({ studyId, investigator } = await plantNewStudy(handle.db, clock, { labId, codePrefix }));
});

async function draftOf(member: TeamMember) {
	const loaded = await loadDraft(handle.db, await member.grantFor('protocol:edit'));
	if (!loaded) throw new Error('there is no draft');
	return loaded;
}

describe('a new study', () => {
	it('makes whoever creates it its investigator, with the pattern as first draft', async () => {
		const roles = await handle.db
			.select({ role: studyRole.role })
			.from(studyRole)
			.where(eq(studyRole.studyId, studyId));
		expect(roles).toEqual([{ role: 'investigator' }]);
		const { number, revision, draft } = await draftOf(investigator);
		expect({ number, revision, visitCount: draft.visits.length }).toEqual({
			number: 1,
			revision: 0,
			visitCount: 8
		});
	});

	it('is refused letters that another study of the lab uses', async () => {
		const other = await plantColleague(handle.db, labId, 'Somebody Else');
		const grant = await other.inStudy('').grantFor('study:create');
		const input = {
			workingTitle: 'Another one',
			publicTitle: 'Another one',
			codePrefix: 'aa',
			phone: '000',
			pattern: 'blank' as const
		};
		const first = await createStudy(handle.db, clock, grant, input);
		expect(first).toEqual({ ok: false, reason: 'prefix-taken' });
	});
});

describe('saving a draft', () => {
	it('raises the revision and names who entered each assumption', async () => {
		const grant = await investigator.grantFor('protocol:edit');
		const saved = await saveDraft(handle.db, grant, {
			number: 1,
			revision: 0,
			draft: finishedDraft()
		});
		expect(saved).toEqual({
			ok: true,
			revision: 1,
			enteredBy: { effectD: 'Ilse Varga', peoplePerArm: 'Ilse Varga' }
		});
	});

	it('refuses a stale save, changes nothing and gives what stands', async () => {
		const grant = await investigator.grantFor('protocol:edit');
		const draft = finishedDraft();
		await saveDraft(handle.db, grant, { number: 1, revision: 0, draft });
		const other = { ...draft, consentTextVersion: 'other' };
		const stale = await saveDraft(handle.db, grant, { number: 1, revision: 0, draft: other });
		expect(stale).toMatchObject({ ok: false, reason: 'stale', revision: 1 });
		expect((await draftOf(investigator)).draft.consentTextVersion).toBe('1');
	});

	it('lets one of two simultaneous saves through', async () => {
		const grant = await investigator.grantFor('protocol:edit');
		const save = (text: string) =>
			saveDraft(handle.db, grant, {
				number: 1,
				revision: 0,
				draft: { ...finishedDraft(), consentTextVersion: text }
			});
		const outcomes = await Promise.all([save('a'), save('b')]);
		expect(outcomes.map(({ ok }) => ok).sort()).toEqual([false, true]);
	});

	it('is refused in words while a limit lies above what the rigs allow', async () => {
		const grant = await investigator.grantFor('protocol:edit');
		const [rig] = await loadRigLimits(handle.db, labId);
		const draft = finishedDraft();
		draft.limits.trialsPerVisit = (rig?.trialsPerVisit ?? 0) + 1;
		const refused = await saveDraft(handle.db, grant, { number: 1, revision: 0, draft });
		expect(refused).toMatchObject({ ok: false, reason: 'out-of-range' });
		expect(!refused.ok && refused.reason === 'out-of-range' ? refused.faults : []).toEqual([
			expect.stringMatching(new RegExp(`^Trials a visit: .*${rig?.name} allows\\.$`))
		]);
		expect((await draftOf(investigator)).revision).toBe(0);
	});

	it('is refused in words while a limit is out of its range', async () => {
		const grant = await investigator.grantFor('protocol:edit');
		const draft = finishedDraft();
		draft.limits.penaltyShareMax = 1.5;
		const refused = await saveDraft(handle.db, grant, { number: 1, revision: 0, draft });
		expect(refused).toMatchObject({ ok: false, reason: 'out-of-range' });
	});

	it('keeps a number that is not typed yet', async () => {
		const grant = await investigator.grantFor('protocol:edit');
		const draft = finishedDraft();
		draft.task.numbers.mu = null;
		await saveDraft(handle.db, grant, { number: 1, revision: 0, draft });
		expect((await draftOf(investigator)).draft.task.numbers.mu).toBeNull();
	});
});

describe('freezing', () => {
	it('is refused with every fault named', async () => {
		const grant = await investigator.grantFor('protocol:freeze');
		const refused = await freezeVersion(handle.db, clock, grant, {
			number: 1,
			revision: 0,
			reason: 'As agreed'
		});
		const fields = !refused.ok && refused.reason === 'faults' ? refused.faults : [];
		expect(fields.map(({ field }) => field)).toEqual([
			'comparison.effectD',
			'comparison.peoplePerArm'
		]);
	});

	it('is refused when the measured properties of the policy speak against it', async () => {
		const edit = await investigator.grantFor('protocol:edit');
		const otherPolicy = { shift: { rule: { firstStepSd: 0.5 } } };
		const draft = { ...finishedDraft(), otherPolicy };
		await saveDraft(handle.db, edit, { number: 1, revision: 0, draft });
		const grant = await investigator.grantFor('protocol:freeze');
		const refused = await freezeVersion(handle.db, clock, grant, {
			number: 1,
			revision: 1,
			reason: 'As agreed'
		});
		const faults = !refused.ok && refused.reason === 'faults' ? refused.faults : [];
		expect(faults.map(({ place, text }) => [place, text.split(':')[0]])).toEqual([
			[
				'The rule may answer noise',
				'The first step of the target is 0.5 SD of the person’s own result'
			]
		]);
	});

	it('is refused when the draft changed since it was seen', async () => {
		const edit = await investigator.grantFor('protocol:edit');
		await saveDraft(handle.db, edit, { number: 1, revision: 0, draft: finishedDraft() });
		const grant = await investigator.grantFor('protocol:freeze');
		const refused = await freezeVersion(handle.db, clock, grant, {
			number: 1,
			revision: 0,
			reason: 'As agreed'
		});
		expect(refused).toEqual({ ok: false, reason: 'stale' });
	});

	it('keeps the reason with who froze it and when', async () => {
		await freezeDraft(handle.db, clock, investigator, finishedDraft());
		const [version] = await findFrozenVersions(handle.db, studyId);
		expect(version).toMatchObject({ frozenBy: 'Ilse Varga', reason: 'As the team agreed' });
		expect(version?.frozenAtMs).toBe(clock.now());
	});

	it('names the person whose roles the declared exceptions forbid', async () => {
		const colleague = await plantColleague(handle.db, labId, 'Dora Both');
		const giving = { studyId, personId: investigator.personId, givenBy: colleague.personId };
		await plantRole(handle.db, { ...giving, role: 'coordinator' });
		const edit = await investigator.grantFor('protocol:edit');
		const draft = { ...finishedDraft(), variants: ['open-investigator'] };
		await saveDraft(handle.db, edit, { number: 1, revision: 0, draft });
		const grant = await investigator.grantFor('protocol:freeze');
		const input = { number: 1, revision: 1, reason: 'As agreed' };
		const refused = await freezeVersion(handle.db, clock, grant, input);
		if (refused.ok || refused.reason !== 'team') throw new Error('the version was not refused');
		const told = refused.clashes.map(({ name, role, other }) => [name, ...[role, other].sort()]);
		expect(told).toEqual([['Ilse Varga', 'coordinator', 'investigator']]);
		expect(await findFrozenVersions(handle.db, studyId)).toEqual([]);
	});

	it('gives a hash over the canonical JSON of what the database gives back', async () => {
		const { hash } = await freezeDraft(handle.db, clock, investigator, finishedDraft());
		const [version] = await findFrozenVersions(handle.db, studyId);
		expect(version?.hash).toBe(hash);
		expect(sha256Hex(canonicalJson(version?.content))).toBe(hash);
	});

	it('lets the database refuse any later change', async () => {
		await freezeDraft(handle.db, clock, investigator, finishedDraft());
		const change = handle.db
			.update(protocolVersion)
			.set({ revision: 99 })
			.where(eq(protocolVersion.studyId, studyId));
		await expect(change).rejects.toMatchObject({ cause: { code: '42501' } });
	});

	it('is recorded with the hash, and the chain stays whole', async () => {
		const { hash } = await freezeDraft(handle.db, clock, investigator, finishedDraft());
		const events = await handle.db
			.select({ kind: recordEvent.kind, item: recordEvent.item, body: recordEvent.body })
			.from(recordEvent)
			.where(eq(recordEvent.studyId, studyId))
			.orderBy(recordEvent.seq);
		expect(events.map(({ kind }) => kind)).toEqual(['study-created', 'protocol-frozen']);
		expect(JSON.parse(events[1]?.body ?? '')).toEqual({ number: 1, hash });
		expect(await verifyChain(handle.db)).toMatchObject({ ok: true });
	});
});

describe('the next version', () => {
	it('starts equal to the last frozen one and cannot be frozen unchanged', async () => {
		await freezeDraft(handle.db, clock, investigator, finishedDraft());
		const grant = await investigator.grantFor('protocol:edit');
		expect(await startDraft(handle.db, clock, grant)).toEqual({ ok: true, number: 2 });
		const freeze = await investigator.grantFor('protocol:freeze');
		const outcome = await freezeVersion(handle.db, clock, freeze, {
			number: 2,
			revision: 0,
			reason: 'As agreed'
		});
		expect(outcome).toEqual({ ok: false, reason: 'unchanged' });
	});

	it('is started once, also when two people press at the same time', async () => {
		await freezeDraft(handle.db, clock, investigator, finishedDraft());
		const grant = await investigator.grantFor('protocol:edit');
		const start = () => startDraft(handle.db, clock, grant);
		const outcomes = await Promise.all([start(), start()]);
		expect(outcomes).toContainEqual({ ok: true, number: 2 });
		expect(outcomes).toContainEqual({ ok: false, reason: 'draft-exists' });
	});

	it('is refused before anything is frozen', async () => {
		const grant = await investigator.grantFor('protocol:edit');
		expect(await startDraft(handle.db, clock, grant)).toEqual({
			ok: false,
			reason: 'draft-exists'
		});
	});

	it('tells what changed', async () => {
		await freezeDraft(handle.db, clock, investigator, finishedDraft());
		await startDraft(handle.db, clock, await investigator.grantFor('protocol:edit'));
		const draft = finishedDraft();
		draft.comparison.peoplePerArm = 40;
		await freezeDraft(handle.db, clock, investigator, draft);
		const grant = await investigator.grantFor('protocol:read');
		const { compared } = await loadProtocol(handle.db, grant);
		expect(compared).toMatchObject({
			number: 1,
			differences: [
				{
					place: 'Primary comparison, People',
					before: '30 per arm at the start',
					after: '40 per arm at the start'
				}
			]
		});
	});
});

describe('the readable protocol', () => {
	it('tells a coordinator nothing of drafts, nor of how blocks are chosen', async () => {
		await freezeDraft(handle.db, clock, investigator, finishedDraft());
		await startDraft(handle.db, clock, await investigator.grantFor('protocol:edit'));
		const colleague = await plantColleague(handle.db, labId, 'Mirela Anjos');
		const { personId } = colleague;
		const givenBy = investigator.personId;
		await plantRole(handle.db, { studyId, personId, role: 'coordinator', givenBy });
		const grant = await colleague.inStudy(studyId).grantFor('protocol:read');
		const { shown, draftNumber } = await loadProtocol(handle.db, grant);
		expect(draftNumber).toBeNull();
		const keys = shown?.parts.map(({ key }) => key);
		expect(keys).toEqual(['task', 'arms', 'visits', 'booking', 'hours', 'comparison', 'limits']);
		expect(
			await investigator.grantFor('protocol:read').then((own) => loadProtocol(handle.db, own))
		).toMatchObject({ draftNumber: 2 });
	});

	it('does not exist for somebody without a role in the study', async () => {
		const stranger = await plantColleague(handle.db, labId, 'No Role');
		await expect(stranger.inStudy(studyId).grantFor('protocol:read')).rejects.toMatchObject({
			status: 404
		});
	});
});

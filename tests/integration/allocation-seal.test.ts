import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { allocateParticipant } from '$lib/server/allocation/allocate-participant';
import { loadAllocation } from '$lib/server/allocation/load-allocation';
import { sealVersion } from '$lib/server/allocation/seal-version';
import { openDatabase, type DatabaseHandle } from '$lib/server/db/client';
import {
	allocation,
	allocationSeal,
	participant,
	recordEvent,
	type StudyRole
} from '$lib/server/db/schema';
import { commitmentOf, openAllocation } from '$lib/server/keys/allocation-seal';
import { liftPause } from '$lib/server/pauses/lift-pause';
import { pauseStudy } from '$lib/server/pauses/pause-study';
import { findFrozenVersions } from '$lib/server/protocols/find-versions';
import { createPatternDraft } from '$lib/protocol/patterns';
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

const key = Buffer.alloc(32, 9).toString('base64url');
const clock = createTestClock();
const services = { clock, settings: { OVALRY_ALLOCATION_KEY: key } };

let database: TestDatabase;
let handle: DatabaseHandle;
let labId: string;

beforeAll(async () => {
	database = await createDatabase();
	handle = openDatabase(database.appUrl);
	({ labId } = await plantLab(handle.db));
});
afterAll(async () => {
	await handle.end();
	await database.drop();
});

async function plant(codePrefix: string, draft = finishedDraft()) {
	const made = await plantNewStudy(handle.db, clock, { labId, codePrefix });
	const { studyId, investigator } = made;
	const { hash } = await freezeDraft(handle.db, clock, investigator, draft);
	const hire = async (role: StudyRole): Promise<TeamMember> => {
		const colleague = await plantColleague(handle.db, labId, `Some ${role}`);
		const second = await plantColleague(handle.db, labId, 'Second Person');
		const { personId } = colleague;
		const giving = { studyId, personId, role, givenBy: investigator.personId };
		const confirmed = role === 'unblinded-statistician' ? { confirmedBy: second.personId } : {};
		await plantRole(handle.db, { ...giving, ...confirmed });
		return colleague.inStudy(studyId);
	};
	return { studyId, investigator, hash, hire, unblinded: await hire('unblinded-statistician') };
}

async function seal(member: TeamMember, protocolHash: string, blockSizes = [4, 6]) {
	const grant = await member.grantFor('allocation:seal');
	return sealVersion(handle.db, services, grant, { protocolHash, blockSizes });
}

async function enrolReady(studyId: string, number: number): Promise<string> {
	const [version] = await findFrozenVersions(handle.db, studyId);
	const [row] = await handle.db
		.insert(participant)
		.values({
			studyId,
			protocolVersionId: version?.id ?? '',
			number,
			code: `P-${number}`,
			state: 'baseline-done',
			zone: 'Europe/Lisbon',
			enrolledAt: new Date(clock.now())
		})
		.returning({ id: participant.id });
	return row?.id ?? '';
}

const release = (id: string) =>
	handle.db.transaction((tx) => allocateParticipant(tx, services, id));

describe('sealing', () => {
	it('stores nothing in the clear and shows the commitment over what it stored', async () => {
		const { studyId, hash, unblinded } = await plant('SA');
		const outcome = await seal(unblinded, hash);
		const [row] = await handle.db
			.select()
			.from(allocationSeal)
			.where(eq(allocationSeal.studyId, studyId));
		const sealed = {
			sealed: row?.sealedSeed ?? new Uint8Array(),
			commitment: row?.commitment ?? ''
		};
		const secret = openAllocation(key, studyId, sealed);
		expect(outcome).toEqual({ ok: true, commitment: commitmentOf(secret) });
		expect(Buffer.from(sealed.sealed).includes(Buffer.from(secret.seed))).toBe(false);
		expect(row?.method).toEqual({ arms: ['adaptive', 'fixed'], blockSizes: [4, 6] });
	});

	it('happens once per version, also when pressed twice at the same time', async () => {
		const { hash, unblinded } = await plant('SB');
		const outcomes = await Promise.all([seal(unblinded, hash), seal(unblinded, hash)]);
		expect(outcomes.filter(({ ok }) => ok)).toHaveLength(1);
		expect(outcomes).toContainEqual({ ok: false, reason: 'already-sealed' });
	});

	it('is refused for sizes that do not hold every arm equally often', async () => {
		const { hash, unblinded } = await plant('SC');
		expect(await seal(unblinded, hash, [3, 4])).toEqual({ ok: false, reason: 'sizes-do-not-fit' });
	});

	it('tells other roles that it happened, and only the unblinded statistician how', async () => {
		const { studyId, hash, unblinded } = await plant('SD');
		await seal(unblinded, hash);
		const events = await handle.db
			.select({ kind: recordEvent.kind, item: recordEvent.item, body: recordEvent.body })
			.from(recordEvent)
			.where(eq(recordEvent.studyId, studyId));
		const told = events.find(({ kind }) => kind === 'allocation-sealed');
		expect(told?.item).toBe('protocol-text');
		expect(JSON.parse(told?.body ?? '')).toEqual({ number: 1, protocolHash: hash });
		const method = events.find(({ kind }) => kind === 'allocation-method-sealed');
		expect(method?.item).toBe('allocation-method');
	});

	it.each(['coordinator', 'operator', 'statistician', 'monitor'] as const)(
		'does not exist for a %s',
		async (role) => {
			const { hire } = await plant(`S${role.charAt(0).toUpperCase()}X`);
			const member = await hire(role);
			await expect(member.grantFor('allocation:read')).rejects.toMatchObject({ status: 404 });
			await expect(member.grantFor('allocation:seal')).rejects.toMatchObject({ status: 404 });
		}
	);
});

describe('releasing', () => {
	it('counts who got an entry and records the arm apart from the event', async () => {
		const { studyId, hash, unblinded } = await plant('RA');
		await seal(unblinded, hash);
		const id = await enrolReady(studyId, 1);
		expect(await release(id)).toBe(true);
		const [version] = await loadAllocation(handle.db, await unblinded.grantFor('allocation:read'));
		expect(version?.seal?.releasedCount).toBe(1);
		const events = await handle.db
			.select({ item: recordEvent.item, body: recordEvent.body })
			.from(recordEvent)
			.where(eq(recordEvent.participantId, id))
			.orderBy(recordEvent.seq);
		expect(events.map(({ item }) => item)).toEqual(['participant-state', 'arm']);
		expect(events[0]?.body).toBe('{}');
	});

	it('waits while the study is paused', async () => {
		const { studyId, hash, unblinded, investigator } = await plant('RB');
		await seal(unblinded, hash);
		const id = await enrolReady(studyId, 1);
		const grant = await investigator.grantFor('study:pause');
		const paused = await pauseStudy(handle.db, clock, grant, { reason: 'Rig check.' });
		expect(await release(id)).toBe(false);
		const pauseId = paused.ok ? paused.pauseId : '';
		for (const member of [investigator, unblinded]) {
			await liftPause(handle.db, clock, await member.grantFor('pause:lift'), { pauseId });
		}
		expect(await release(id)).toBe(true);
	});

	it('gives the only arm in a study of one arm', async () => {
		const draft = createPatternDraft('blank');
		const { studyId, hash, unblinded } = await plant('RC', draft);
		expect(await seal(unblinded, hash, [1])).toMatchObject({ ok: true });
		const id = await enrolReady(studyId, 1);
		expect(await release(id)).toBe(true);
		const [row] = await handle.db
			.select({ arm: allocation.arm })
			.from(allocation)
			.where(eq(allocation.participantId, id));
		expect(row?.arm).toBe('arm-1');
	});
});

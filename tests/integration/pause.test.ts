import { and, eq } from 'drizzle-orm';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { openDatabase, type DatabaseHandle } from '$lib/server/db/client';
import { recordEvent, studyPause } from '$lib/server/db/schema';
import { isPaused } from '$lib/server/pauses/is-paused';
import { liftPause } from '$lib/server/pauses/lift-pause';
import { listOpenPauses } from '$lib/server/pauses/list-pauses';
import { pauseParticipant, pauseStudy } from '$lib/server/pauses/pause-study';
import { createDatabase, type TestDatabase } from '../support/create-database';
import { plantColleague, plantNewStudy, plantRole, type TeamMember } from '../support/plant-team';
import { createTestClock, plantLab } from '../support/planted-study';

let database: TestDatabase;
let handle: DatabaseHandle;
const clock = createTestClock();
let labId: string;
let studyId: string;
let ilse: TeamMember;
let mirela: TeamMember;
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
	const codePrefix = `P${String.fromCharCode(65 + prefixes++)}`;
	const made = await plantNewStudy(handle.db, clock, { labId, codePrefix });
	studyId = made.studyId;
	ilse = made.investigator;
	const colleague = await plantColleague(handle.db, labId, 'Mirela Anjos');
	const { personId } = colleague;
	await plantRole(handle.db, { studyId, personId, role: 'coordinator', givenBy: ilse.personId });
	mirela = colleague.inStudy(studyId);
});

async function pause(member: TeamMember, reason = 'A rig behaved oddly.') {
	const grant = await member.grantFor('study:pause');
	const outcome = await pauseStudy(handle.db, clock, grant, { reason });
	return outcome.ok ? outcome.pauseId : outcome.reason;
}
async function lift(member: TeamMember, pauseId: string) {
	return liftPause(handle.db, clock, await member.grantFor('pause:lift'), { pauseId });
}

describe('a pause', () => {
	it('is made by one person and lifted by two different ones', async () => {
		const pauseId = await pause(mirela);
		expect(await isPaused(handle.db, studyId)).toBe(true);
		expect(await lift(mirela, pauseId)).toEqual({ ok: true, state: 'waits-for-second' });
		expect(await lift(mirela, pauseId)).toEqual({ ok: false, reason: 'same-person' });
		expect(await isPaused(handle.db, studyId)).toBe(true);
		expect(await lift(ilse, pauseId)).toEqual({ ok: true, state: 'lifted' });
		expect(await isPaused(handle.db, studyId)).toBe(false);
		expect(await lift(ilse, pauseId)).toEqual({ ok: false, reason: 'no-such-pause' });
	});

	it('cannot be lifted by one person in the database either', async () => {
		const pauseId = await pause(mirela);
		const alone = handle.db
			.update(studyPause)
			.set({
				firstLiftBy: ilse.personId,
				secondLiftBy: ilse.personId,
				liftedAt: new Date(clock.now())
			})
			.where(eq(studyPause.id, pauseId));
		await expect(alone).rejects.toMatchObject({ cause: { code: '23514' } });
	});

	it('is made once by the same person; another person’s must be lifted as well', async () => {
		const first = await pause(mirela);
		expect(await pause(mirela)).toBe('already-paused');
		const second = await pause(ilse);
		await lift(ilse, first);
		await lift(mirela, first);
		expect(await isPaused(handle.db, studyId)).toBe(true);
		await lift(ilse, second);
		await lift(mirela, second);
		expect(await isPaused(handle.db, studyId)).toBe(false);
	});

	it('is listed with who paused, who asked to lift, and whether the viewer may be next', async () => {
		const pauseId = await pause(mirela, 'The chair is loose.');
		await lift(ilse, pauseId);
		const seen = await listOpenPauses(handle.db, await ilse.grantFor('study:pause'));
		expect(seen).toEqual([
			{
				id: pauseId,
				reason: 'The chair is loose.',
				pausedBy: 'Mirela Anjos',
				isOwn: false,
				pausedAtMs: clock.now(),
				firstLiftBy: 'Ilse Varga',
				mayLift: false
			}
		]);
		const [other] = await listOpenPauses(handle.db, await mirela.grantFor('study:pause'));
		expect(other?.mayLift).toBe(true);
	});

	it('of another study cannot be lifted from here', async () => {
		const pauseId = await pause(mirela);
		const other = await plantNewStudy(handle.db, clock, { labId, codePrefix: 'ZZZ' });
		expect(await lift(other.investigator, pauseId)).toEqual({
			ok: false,
			reason: 'no-such-pause'
		});
	});

	it('is recorded without its reason', async () => {
		await pause(mirela, 'Something personal.');
		const [event] = await handle.db
			.select({ item: recordEvent.item, body: recordEvent.body })
			.from(recordEvent)
			.where(and(eq(recordEvent.studyId, studyId), eq(recordEvent.kind, 'study-paused')));
		expect(event?.item).toBe('protocol-text');
		expect(event?.body).not.toContain('personal');
	});

	it('of one participant stops only that participant', async () => {
		const participantId = crypto.randomUUID();
		const person = { kind: 'participant' } as const;
		const input = { studyId, participantId, reason: 'I need a break.' };
		await handle.db.transaction((tx) => pauseParticipant(tx, clock, person, input));
		expect(await isPaused(handle.db, studyId)).toBe(false);
		expect(await isPaused(handle.db, studyId, participantId)).toBe(true);
		expect(await isPaused(handle.db, studyId, crypto.randomUUID())).toBe(false);
	});

	it('waits for whoever is issuing, and is seen by whoever issues next', async () => {
		const order: string[] = [];
		const issuing = handle.db.transaction(async (tx) => {
			expect(await isPaused(tx, studyId)).toBe(false);
			await new Promise((resolve) => setTimeout(resolve, 400));
			order.push('issued');
		});
		await new Promise((resolve) => setTimeout(resolve, 100));
		await pause(mirela);
		order.push('paused');
		await issuing;
		expect(order).toEqual(['issued', 'paused']);
		expect(await isPaused(handle.db, studyId)).toBe(true);
	});
});

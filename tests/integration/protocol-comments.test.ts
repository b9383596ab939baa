import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { loadComments } from '$lib/server/comments/load-comments';
import { answerComment, resolveComment, writeComment } from '$lib/server/comments/write-comment';
import { openDatabase, type DatabaseHandle } from '$lib/server/db/client';
import type { StudyRole } from '$lib/server/db/schema';
import { loadProtocol } from '$lib/server/protocols/load-protocol';
import { createDatabase, type TestDatabase } from '../support/create-database';
import { createFullContent } from '../support/full-protocol';
import {
	createTestClock,
	plantLab,
	plantMember,
	plantStudy,
	plantedNowMs,
	type PlantedStudy
} from '../support/planted-study';

type Member = Awaited<ReturnType<typeof plantMember>>;

let database: TestDatabase;
let owner: DatabaseHandle;
let app: DatabaseHandle;
let home: PlantedStudy;
const clock = createTestClock();

beforeAll(async () => {
	database = await createDatabase();
	owner = openDatabase(database.ownerUrl);
	app = openDatabase(database.appUrl);
});
afterAll(async () => {
	await app.end();
	await owner.end();
	await database.drop();
});
beforeEach(async () => {
	clock.set(plantedNowMs);
	home = await plantStudy(owner.db, await plantLab(owner.db), { content: createFullContent() });
});

const hire = (role: StudyRole) => plantMember(owner.db, home, role);

async function write(member: Member, anchor: string, body = 'Is this enough?') {
	const grant = await member.grantFor('comment:write');
	return writeComment(app.db, clock, grant, { version: 1, anchor, body });
}

async function read(member: Member) {
	const grant = await member.grantFor('protocol:read');
	const { shown } = await loadProtocol(app.db, grant);
	if (!shown) throw new Error('nothing is frozen');
	return loadComments(app.db, grant, { versionId: home.versionId, parts: shown.parts });
}

describe('a comment on the protocol', () => {
	it('stands at its line with who wrote it, is answered, resolved and opened again', async () => {
		const [coordinator, investigator] = [await hire('coordinator'), await hire('investigator')];
		const written = await write(coordinator, 'booking/clock', 'Nobody comes before nine.');
		if (!written.ok) throw new Error(written.reason);
		const commentId = written.id;
		clock.set(plantedNowMs + 60_000);
		const grant = await investigator.grantFor('comment:write');
		const answer = { commentId, body: 'Then it begins at nine.' };
		expect(await answerComment(app.db, clock, grant, answer)).toMatchObject({ ok: true });
		await resolveComment(app.db, clock, grant, { commentId, resolved: true });
		expect(await read(coordinator)).toMatchObject([
			{
				place: 'Booking, Starts',
				body: 'Nobody comes before nine.',
				writtenBy: 'Some coordinator',
				answers: [{ body: 'Then it begins at nine.', writtenBy: 'Some investigator' }],
				resolved: { by: 'Some investigator', atMs: plantedNowMs + 60_000 }
			}
		]);
		await resolveComment(app.db, clock, grant, { commentId, resolved: false });
		expect((await read(coordinator))[0]?.resolved).toBeNull();
	});

	it('is not read by roles that do not read the words it is about', async () => {
		const statistician = await hire('statistician');
		const places = ['aims/settle', 'visits/visit-2-arm-fixed', 'visits', 'limits/shift'];
		for (const place of places)
			expect(await write(statistician, place)).toMatchObject({ ok: true });
		expect(await read(statistician)).toHaveLength(places.length);
		for (const role of ['investigator', 'monitor', 'approver'] as const) {
			expect(await read(await hire(role))).toHaveLength(places.length);
		}
		for (const role of ['coordinator', 'operator'] as const) {
			expect(await read(await hire(role))).toEqual([]);
		}
	});

	it('can neither be written, answered nor resolved where the writer does not read', async () => {
		const [statistician, coordinator] = [await hire('statistician'), await hire('coordinator')];
		const hidden = await write(statistician, 'aims/settle');
		if (!hidden.ok) throw new Error(hidden.reason);
		const refused = { ok: false, reason: 'no-such-place' };
		expect(await write(coordinator, 'aims/settle')).toEqual(refused);
		expect(await write(coordinator, 'nowhere')).toEqual(refused);
		const grant = await coordinator.grantFor('comment:write');
		const commentId = hidden.id;
		expect(await answerComment(app.db, clock, grant, { commentId, body: 'What?' })).toEqual(
			refused
		);
		expect(await resolveComment(app.db, clock, grant, { commentId, resolved: true })).toEqual({
			ok: false,
			reason: 'no-such-comment'
		});
	});

	it('is left by the five roles that review, and by nobody else', async () => {
		for (const role of [
			'investigator',
			'statistician',
			'coordinator',
			'monitor',
			'approver'
		] as const) {
			expect(await write(await hire(role), 'hours/lead')).toMatchObject({ ok: true });
		}
		for (const role of ['operator', 'unblinded-statistician'] as const) {
			const member = await hire(role);
			await expect(member.grantFor('comment:write')).rejects.toMatchObject({ status: 404 });
		}
	});
});

import { randomUUID } from 'node:crypto';
import { eq, sql } from 'drizzle-orm';
import { afterAll, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import { createClock } from '$lib/server/clock';
import { openDatabase, type Database, type DatabaseHandle } from '$lib/server/db/client';
import { protocolVersion, recordEvent, studyRole, type StudyRole } from '$lib/server/db/schema';
import { confirmRole, endRole, giveRole } from '$lib/server/members/give-role';
import { loadCandidates, loadTeam } from '$lib/server/members/load-team';
import { loadTeamWaiting } from '$lib/server/home/team-waiting';
import { createDatabase, type TestDatabase } from '../support/create-database';
import {
	plantBareStudy,
	plantEmptyLab,
	plantPerson,
	type PlantedPerson
} from '../support/plant-person';
import { plantedContent } from '../support/planted-study';

let database: TestDatabase;
let app: DatabaseHandle;
let owner: DatabaseHandle;
let db: Database;
const clock = createClock(0);

beforeAll(async () => {
	database = await createDatabase();
	app = openDatabase(database.appUrl);
	owner = openDatabase(database.ownerUrl);
	db = app.db;
});
afterAll(async () => {
	await app.end();
	await owner.end();
	await database.drop();
});

let labId: string;
let studyId: string;
let sigrid: PlantedPerson;
let bo: PlantedPerson;
let cy: PlantedPerson;

beforeEach(async () => {
	labId = await plantEmptyLab(owner.db);
	sigrid = await plantPerson(owner.db, 'Sigrid Steward', { labId, isSteward: true });
	bo = await plantPerson(owner.db, 'Bo Approver', { labId });
	cy = await plantPerson(owner.db, 'Cy Holder', { labId });
	studyId = await plantBareStudy(owner.db, { labId, createdBy: sigrid.id });
});

const give = async (from: PlantedPerson, to: PlantedPerson, role: StudyRole) =>
	giveRole(db, clock, await from.grantFor('role:give', { studyId }), { personId: to.id, role });
const roleId = async (of: PlantedPerson, role: StudyRole) => {
	const rows = await db.select().from(studyRole).where(eq(studyRole.personId, of.id));
	return rows.find((row) => row.role === role && !row.endedAt)?.id ?? randomUUID();
};
const confirm = async (by: PlantedPerson, of: PlantedPerson, role: StudyRole) =>
	confirmRole(db, clock, await by.grantFor('role:confirm', { studyId }), await roleId(of, role));
const end = async (of: PlantedPerson, role: StudyRole) =>
	endRole(db, clock, await sigrid.grantFor('role:give', { studyId }), await roleId(of, role));

describe('a role that sees arms', () => {
	test('counts only once a second person has confirmed it', async () => {
		await give(sigrid, sigrid, 'coordinator');
		expect(await give(sigrid, bo, 'approver')).toEqual({ ok: true, waits: true });
		await expect(bo.grantFor('decision:read', { studyId })).rejects.toMatchObject({ status: 404 });
		await give(sigrid, cy, 'operator');
		expect(await confirm(cy, bo, 'approver')).toMatchObject({ ok: true, role: 'approver' });
		const grant = await bo.grantFor('decision:read', { studyId });
		expect(grant.roles).toEqual(['approver']);
	});

	test('is confirmed neither by who gave it nor by who receives it', async () => {
		await give(sigrid, bo, 'approver');
		expect(await confirm(sigrid, bo, 'approver')).toEqual({ ok: false, reason: 'own-role' });
		expect(await confirm(bo, bo, 'approver')).toEqual({ ok: false, reason: 'own-role' });
		const [row] = await db.select().from(studyRole).where(eq(studyRole.personId, bo.id));
		expect(row?.confirmedBy).toBeNull();
	});

	test('can be confirmed by nobody without a part in the study', async () => {
		await give(sigrid, bo, 'approver');
		await expect(cy.grantFor('role:confirm', { studyId })).rejects.toMatchObject({ status: 404 });
	});

	test('is given by nobody to themself', async () => {
		for (const role of ['approver', 'unblinded-statistician', 'monitor'] as const) {
			expect(await give(sigrid, sigrid, role)).toEqual({ ok: false, reason: 'own-role' });
		}
		for (const role of ['approver', 'unblinded-statistician', 'monitor'] as const) {
			const values = { studyId, personId: bo.id, role, givenBy: bo.id };
			await expect(db.insert(studyRole).values(values)).rejects.toMatchObject({
				cause: { constraint_name: 'study_role_two_people' }
			});
		}
	});

	test('is confirmed once', async () => {
		await give(sigrid, cy, 'operator');
		await give(sigrid, bo, 'approver');
		expect(await confirm(cy, bo, 'approver')).toMatchObject({ ok: true });
		expect(await confirm(cy, bo, 'approver')).toEqual({ ok: false, reason: 'not-waiting' });
	});
});

test('three people can run a study: steward and investigator, approver, holder of the allocation', async () => {
	const blind = ['investigator', 'coordinator', 'operator', 'statistician'] as const;
	for (const role of blind) {
		expect(await give(sigrid, sigrid, role)).toEqual({ ok: true, waits: false });
	}
	await give(sigrid, bo, 'approver');
	await give(sigrid, cy, 'unblinded-statistician');
	const seen = await loadTeam(db, await sigrid.grantFor('team:read', { studyId }));
	const waiting = seen.filter((held) => held.state === 'waiting');
	expect(waiting.map((held) => [held.personName, held.secondPeople])).toEqual([
		['Cy Holder', ['Bo Approver']],
		['Bo Approver', ['Cy Holder']]
	]);
	const items = await loadTeamWaiting(db, await bo.grantFor('team:read', { studyId }));
	expect(items.map((item) => item.title).toSorted()).toEqual([
		'Cy Holder is to be unblinded statistician',
		'You are to be approver'
	]);
	expect(await confirm(bo, cy, 'unblinded-statistician')).toMatchObject({ ok: true });
	expect(await confirm(cy, bo, 'approver')).toMatchObject({ ok: true });
	expect((await sigrid.grantFor('study:read', { studyId })).roles.toSorted()).toEqual(
		[...blind].toSorted()
	);
	expect((await bo.grantFor('decision:settle', { studyId })).roles).toEqual(['approver']);
	expect((await cy.grantFor('allocation:seal', { studyId })).roles).toEqual([
		'unblinded-statistician'
	]);
});

describe('roles that would break blinding', () => {
	const forbidden = (['approver', 'unblinded-statistician'] as const).flatMap((unblinded) =>
		(['coordinator', 'operator', 'statistician', 'investigator'] as const).map(
			(blinded) => [unblinded, blinded] as const
		)
	);

	test.each(forbidden)('%s and %s are refused in either order', async (unblinded, blinded) => {
		await give(sigrid, bo, unblinded);
		expect(await give(sigrid, bo, blinded)).toEqual({
			ok: false,
			reason: 'forbidden-pair',
			partner: unblinded
		});
		await give(sigrid, cy, blinded);
		expect(await give(sigrid, cy, unblinded)).toEqual({
			ok: false,
			reason: 'forbidden-pair',
			partner: blinded
		});
	});

	test('stay refused after the first of the two has ended', async () => {
		await give(sigrid, bo, 'coordinator');
		expect(await end(bo, 'coordinator')).toMatchObject({ ok: true });
		expect(await give(sigrid, bo, 'approver')).toMatchObject({
			reason: 'forbidden-pair',
			partner: 'coordinator'
		});
		await give(sigrid, sigrid, 'operator');
		await give(sigrid, cy, 'approver');
		const nina = await plantPerson(owner.db, 'Nina', { labId });
		await give(sigrid, nina, 'operator');
		await confirm(nina, cy, 'approver');
		await end(cy, 'approver');
		expect(await give(sigrid, cy, 'coordinator')).toMatchObject({ partner: 'approver' });
	});

	test('are not held against somebody whose role never counted', async () => {
		await give(sigrid, bo, 'approver');
		await end(bo, 'approver');
		expect(await give(sigrid, bo, 'coordinator')).toEqual({ ok: true, waits: false });
	});

	test('are held against somebody who was confirmed once, even if given again and taken back', async () => {
		const nina = await plantPerson(owner.db, 'Nina', { labId });
		await give(sigrid, nina, 'operator');
		await give(sigrid, bo, 'approver');
		await confirm(nina, bo, 'approver');
		await end(bo, 'approver');
		await give(sigrid, bo, 'approver');
		await end(bo, 'approver');
		expect(await give(sigrid, bo, 'coordinator')).toMatchObject({ partner: 'approver' });
	});

	test('are refused by the database itself, also when given at the same moment', async () => {
		const values = (role: StudyRole) => ({ studyId, personId: bo.id, role, givenBy: sigrid.id });
		const tries = await Promise.allSettled(
			(['approver', 'coordinator', 'unblinded-statistician', 'operator'] as const).map((role) =>
				db.insert(studyRole).values(values(role))
			)
		);
		const held = await db.select().from(studyRole).where(eq(studyRole.personId, bo.id));
		const roles = held.map((row) => row.role);
		const sees = roles.some((role) => role === 'approver' || role === 'unblinded-statistician');
		const runs = roles.some((role) => role === 'coordinator' || role === 'operator');
		expect(sees && runs).toBe(false);
		const refused = tries.filter((one) => one.status === 'rejected');
		for (const one of refused) {
			expect(one.reason).toMatchObject({
				cause: { code: '23514', constraint_name: 'study_role_forbidden_pair' }
			});
		}
		expect(refused.length).toBeGreaterThanOrEqual(2);
	});

	test('are two for approver and holder of the allocation, one in a declared small team', async () => {
		await give(sigrid, bo, 'approver');
		expect(await give(sigrid, bo, 'unblinded-statistician')).toMatchObject({ partner: 'approver' });
		await freeze(['small-team']);
		expect(await give(sigrid, bo, 'unblinded-statistician')).toEqual({ ok: true, waits: true });
	});

	test('follow the protocol where it lets the investigator see arms', async () => {
		await give(sigrid, bo, 'investigator');
		await freeze(['open-investigator']);
		expect(await give(sigrid, bo, 'approver')).toEqual({ ok: true, waits: true });
		expect(await give(sigrid, bo, 'coordinator')).toMatchObject({ reason: 'forbidden-pair' });
	});

	test('keep a version from being frozen that would forbid what the team holds', async () => {
		await give(sigrid, bo, 'investigator');
		await give(sigrid, bo, 'coordinator');
		await expect(freeze(['open-investigator'])).rejects.toMatchObject({
			cause: { constraint_name: 'protocol_version_team' }
		});
		await freeze([]);
	});

	test('are marked on the form before anybody presses', async () => {
		await give(sigrid, bo, 'coordinator');
		const grant = await sigrid.grantFor('team:read', { studyId });
		const found = (await loadCandidates(db, grant)).find(({ id }) => id === bo.id);
		expect(found?.barred).toEqual({
			approver: 'coordinator',
			'unblinded-statistician': 'coordinator'
		});
	});

	async function freeze(variants: string[]): Promise<void> {
		const id = randomUUID();
		const content = { ...plantedContent, variants };
		await db.insert(protocolVersion).values({ id, studyId, number: 1, content });
		const frozen = { hash: randomUUID(), frozenAt: new Date(), frozenBy: sigrid.id };
		try {
			await db.update(protocolVersion).set(frozen).where(eq(protocolVersion.id, id));
		} catch (error) {
			await owner.db.delete(protocolVersion).where(eq(protocolVersion.id, id));
			throw error;
		}
	}
});

describe('roles', () => {
	test('are given to members only, once, and by the steward only', async () => {
		const stranger = await plantPerson(owner.db, 'Stranger');
		expect(await give(sigrid, stranger, 'operator')).toEqual({
			ok: false,
			reason: 'no-such-member'
		});
		await give(sigrid, bo, 'operator');
		expect(await give(sigrid, bo, 'operator')).toEqual({ ok: false, reason: 'has-it' });
		await expect(bo.grantFor('role:give', { studyId })).rejects.toMatchObject({ status: 404 });
	});

	test('stop counting the moment they end', async () => {
		await give(sigrid, bo, 'coordinator');
		await bo.grantFor('participant:list', { studyId });
		await end(bo, 'coordinator');
		await expect(bo.grantFor('participant:list', { studyId })).rejects.toMatchObject({
			status: 404
		});
	});

	test('of another study are out of reach', async () => {
		const otherLab = await plantEmptyLab(owner.db, 'Other Lab');
		const otto = await plantPerson(owner.db, 'Otto Other', { labId: otherLab, isSteward: true });
		await give(sigrid, bo, 'operator');
		const otherStudy = await plantBareStudy(owner.db, { labId: otherLab, createdBy: otto.id });
		const grant = await otto.grantFor('role:give', { studyId: otherStudy });
		expect(await endRole(db, clock, grant, await roleId(bo, 'operator'))).toEqual({
			ok: false,
			reason: 'no-such-role'
		});
	});

	test('leave an event each, without any name', async () => {
		await give(sigrid, cy, 'operator');
		await give(sigrid, bo, 'approver');
		await confirm(cy, bo, 'approver');
		await end(bo, 'approver');
		const events = await db
			.select()
			.from(recordEvent)
			.where(eq(recordEvent.studyId, studyId))
			.orderBy(sql`seq`);
		expect(events.map(({ kind }) => kind)).toEqual([
			'role-given',
			'role-given',
			'role-confirmed',
			'role-ended'
		]);
		expect(JSON.stringify(events)).not.toMatch(/Bo Approver|lab\.example/);
	});
});

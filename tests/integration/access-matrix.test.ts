import { randomUUID } from 'node:crypto';
import { and, eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { permissions, type Permission } from '$lib/server/access/permissions';
import { findLevels, items } from '$lib/server/access/visibility';
import { openDatabase, type DatabaseHandle } from '$lib/server/db/client';
import { membership, studyRole, studyRoles, type StudyRole } from '$lib/server/db/schema';
import { createDatabase, type TestDatabase } from '../support/create-database';
import {
	plantBareStudy,
	plantEmptyLab,
	plantPerson,
	type PlantedPerson
} from '../support/plant-person';

type Rule = {
	scope: 'person' | 'lab' | 'study';
	stewardOnly?: boolean;
	roles?: readonly StudyRole[] | 'any';
	steward?: boolean;
	waiting?: boolean;
};
const table = permissions as Record<string, Rule>;
const names = Object.keys(permissions) as Permission[];
const armsRoles: StudyRole[] = ['approver', 'unblinded-statistician'];

/** Everybody who can stand before a study: one role each, steward, member, and several at once. */
const standings: { who: string; roles: StudyRole[]; isSteward?: boolean }[] = [
	{ who: 'a member without a role', roles: [] },
	{ who: 'the steward', roles: [], isSteward: true },
	...studyRoles.map((role) => ({ who: `the ${role}`, roles: [role] })),
	{
		who: 'who designs, books, runs and analyses',
		roles: ['investigator', 'coordinator', 'operator', 'statistician'],
		isSteward: true
	}
];

let database: TestDatabase;
let app: DatabaseHandle;
let owner: DatabaseHandle;
let labId: string;
let studyId: string;
let siblingId: string;
let foreignLabId: string;
let foreignStudyId: string;
let keeper: PlantedPerson;
let second: PlantedPerson;
const people = new Map<string, PlantedPerson>();

beforeAll(async () => {
	database = await createDatabase();
	app = openDatabase(database.appUrl);
	owner = openDatabase(database.ownerUrl);
	const { db } = owner;
	labId = await plantEmptyLab(db);
	foreignLabId = await plantEmptyLab(db, 'Foreign Lab');
	keeper = await plantPerson(db, 'Keeper', { labId, isSteward: true });
	second = await plantPerson(db, 'Second', { labId });
	const foreigner = await plantPerson(db, 'Foreigner', { labId: foreignLabId });
	studyId = await plantBareStudy(db, { labId, createdBy: keeper.id });
	siblingId = await plantBareStudy(db, { labId, createdBy: keeper.id });
	foreignStudyId = await plantBareStudy(db, { labId: foreignLabId, createdBy: foreigner.id });
	for (const { who, roles, isSteward } of standings) {
		people.set(who, await plant(who, roles, isSteward));
	}
});
afterAll(async () => {
	await app.end();
	await owner.end();
	await database.drop();
});

async function plant(name: string, roles: StudyRole[], isSteward = false): Promise<PlantedPerson> {
	const one = await plantPerson(owner.db, name, { labId, isSteward });
	for (const role of roles) await giveRole(one.id, role);
	// Questions are asked as the application's role asks them.
	one.locals.db = app.db;
	return one;
}

async function giveRole(personId: string, role: StudyRole, isConfirmed = true): Promise<void> {
	const confirmed =
		isConfirmed && armsRoles.includes(role)
			? { confirmedBy: second.id, confirmedAt: new Date() }
			: {};
	await owner.db
		.insert(studyRole)
		.values({ studyId, personId, role, givenBy: keeper.id, ...confirmed });
}

async function ask(
	one: PlantedPerson,
	permission: Permission,
	place: { labId?: string; studyId?: string }
): Promise<'allowed' | 'no such page'> {
	try {
		await one.grantFor(permission, place);
		return 'allowed';
	} catch (error) {
		expect(error).toMatchObject({ status: 404, body: { message: 'Not found' } });
		return 'no such page';
	}
}

/** What the table says, read here once more on its own. */
function expected(name: Permission, standing: (typeof standings)[number]): string {
	const rule = table[name];
	if (!rule) throw new Error(name);
	const isSteward = standing.isSteward ?? false;
	const wanted = rule.roles === 'any' ? [...studyRoles] : (rule.roles ?? []);
	const allowed =
		rule.scope === 'person' ||
		(rule.scope === 'lab' && (isSteward || !rule.stewardOnly)) ||
		(rule.scope === 'study' &&
			((rule.steward === true && isSteward) ||
				standing.roles.some((role) => wanted.includes(role))));
	return allowed ? 'allowed' : 'no such page';
}

const personOf = (who: string): PlantedPerson => {
	const one = people.get(who);
	if (!one) throw new Error(who);
	return one;
};

describe.each(standings)('$who', (standing) => {
	test('may do in their own study exactly what the table says', async () => {
		const answers: [string, string][] = [];
		for (const name of names) {
			answers.push([name, await ask(personOf(standing.who), name, { labId, studyId })]);
		}
		expect(answers).toEqual(names.map((name) => [name, expected(name, standing)]));
	});

	test('may do in another study of the lab what a steward may, and nothing else', async () => {
		const bare = { who: '', roles: [], isSteward: standing.isSteward ?? false };
		const answers: [string, string][] = [];
		for (const name of names) {
			const place = { labId, studyId: siblingId };
			answers.push([name, await ask(personOf(standing.who), name, place)]);
		}
		expect(answers).toEqual(names.map((name) => [name, expected(name, bare)]));
	});

	test('may do nothing in a foreign lab', async () => {
		for (const name of names.filter((each) => table[each]?.scope !== 'person')) {
			const place = { labId: foreignLabId, studyId: foreignStudyId };
			expect([name, await ask(personOf(standing.who), name, place)]).toEqual([
				name,
				'no such page'
			]);
		}
	});

	test('sees of each item what the visibility table says', async () => {
		if (standing.roles.length === 0) return expect(standing.roles).toEqual([]);
		const grant = await personOf(standing.who).grantFor('study:read', { studyId });
		const viewer = [...(standing.isSteward ? (['steward'] as const) : []), ...standing.roles];
		for (const item of items) {
			expect([item, grant.sees(item)]).toEqual([item, findLevels(viewer, item)]);
		}
	});
});

describe('an address that names nothing', () => {
	test.each([
		['an unknown study', randomUUID()],
		['no identifier', 'new'],
		['a statement', "' or 1=1 --"],
		['nothing', undefined]
	])('%s is answered like a forbidden one', async (_, wanted) => {
		for (const name of names.filter((each) => table[each]?.scope !== 'person')) {
			const place = wanted === undefined ? {} : { labId: wanted, studyId: wanted };
			expect(await ask(personOf('the steward'), name, place)).toBe('no such page');
		}
	});
});

describe('somebody who is not signed in', () => {
	test('is led to the sign-in page and back, whatever they ask for', async () => {
		const locals: App.Locals = {
			...keeper.locals,
			person: null,
			path: `/studies/${studyId}/people?view=waits`
		};
		const stranger = { ...keeper, locals };
		for (const name of names) {
			const { requirePermission } = await import('$lib/server/access/require-permission');
			await expect(
				requirePermission(stranger.locals, name, { labId, studyId })
			).rejects.toMatchObject({
				status: 303,
				location: `/signin?to=${encodeURIComponent(locals.path)}`
			});
		}
	});
});

describe('access ends at once', () => {
	test('with a role', async () => {
		const one = await plant('Ends Soon', ['coordinator']);
		expect(await ask(one, 'participant:list', { studyId })).toBe('allowed');
		await owner.db
			.update(studyRole)
			.set({ endedAt: new Date() })
			.where(eq(studyRole.personId, one.id));
		expect(await ask(one, 'participant:list', { studyId })).toBe('no such page');
	});

	test('with the membership of the lab, whatever roles are left', async () => {
		const one = await plant('Leaves Soon', [...studyRoles].slice(0, 1), true);
		await owner.db
			.update(membership)
			.set({ endedAt: new Date() })
			.where(and(eq(membership.personId, one.id), eq(membership.labId, labId)));
		for (const name of names.filter((each) => table[each]?.scope !== 'person')) {
			expect(await ask(one, name, { labId, studyId })).toBe('no such page');
		}
	});
});

test('a role that waits for its second person opens the team’s page and no other', async () => {
	for (const role of armsRoles) {
		const one = await plantPerson(owner.db, 'Waits', { labId });
		await giveRole(one.id, role, false);
		for (const name of names.filter((each) => table[each]?.scope === 'study')) {
			const wanted = name === 'team:read' || name === 'role:confirm';
			expect([name, await ask(one, name, { studyId })]).toEqual([
				name,
				wanted ? 'allowed' : 'no such page'
			]);
		}
	}
});

import { randomUUID } from 'node:crypto';
import postgres from 'postgres';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openDatabase } from '$lib/server/db/client';
import { isAllowed, permissions, type Standing } from '$lib/server/access/permissions';
import { findLevels } from '$lib/server/access/visibility';
import { team } from '$lib/server/demo/seed/cast';
import { at } from '$lib/server/demo/seed/demo-time';
import { createDatabase, type TestDatabase } from '../support/create-database';
import { createPuckProtocol } from '../support/puck-protocol';
import { plantRunningStudy } from '../support/running-study';
import {
	askEverything,
	signInAll,
	statusOf,
	type Answer,
	type Filling
} from '../support/twin/ask-everything';
import { loadFillings, unknownLink } from '../support/twin/fillings';
import { listEntries, type Entry } from '../support/twin/list-entries';
import { plantValues, type Plant } from '../support/twin/plant-values';
import { playStudy, type Played } from '../support/twin/played-study';
import { openHome, startWeb, type Home, type WebServer } from '../support/twin/web-server';

type Role = (typeof team)[number]['role'];
type Fillings = (entry: Entry) => readonly Filling[];

const roles = team.map(({ role }) => role);
const entries = listEntries().filter(({ guard }) => guard !== 'link');
const moment = { name: 'a practice morning', atMs: at('2027-03-03', '07:00') };

let database: TestDatabase;
let home: Home;
let web: WebServer;
let sql: postgres.Sql;
let plants: Plant[] = [];
let own: Fillings;
let others: { name: string; isOfLab: boolean; fillings: Fillings; labId: string }[] = [];
const cookies = new Map<Role, string | undefined>();
const answers = new Map<Role, Answer[]>();

beforeAll(async () => {
	database = await createDatabase();
	home = openHome(database);
	sql = postgres(database.ownerUrl, { max: 1, onnotice: () => {} });
	await playStudy({
		database,
		home,
		arms: ['adaptive', 'fixed'],
		moments: [moment],
		look: prepare
	});
	web = await startWeb(home, moment.atMs);
	for (const { role } of team) answers.set(role, await ask(role, entries, own));
}, 1_200_000);

afterAll(async () => {
	await web?.stop();
	await sql?.end();
	await database?.drop();
	home?.remove();
});

async function prepare(played: Played): Promise<void> {
	plants = await plantValues(sql, played);
	own = await loadFillings(sql, played.studyId, [unknownLink]);
	others = [
		await plantOther('another study of the lab', played.labId),
		await plantOther('a study of another lab', null)
	];
	const ids = team.map(({ key }) => played.world.people.get(key)?.id ?? '');
	const given = await signInAll(sql, ids);
	for (const [index, { role }] of team.entries()) cookies.set(role, given.get(ids[index] ?? ''));
}

/** A study that nobody of the team belongs to, with a person and a visit. */
async function plantOther(name: string, labId: string | null) {
	const owner = openDatabase(database.ownerUrl, { max: 1 });
	try {
		const other = await plantRunningStudy(owner.db, createPuckProtocol(), moment.atMs);
		const person = await other.enrol('ZQ-OTHER');
		await other.book(person.id, 1, moment.atMs + 3_600_000);
		const ids = { id: randomUUID(), study_id: other.study.id, participant_id: person.id };
		await sql`insert into decision select (jsonb_populate_record(null::decision,
			to_jsonb(d) || ${sql.json(ids)})).* from decision d limit 1`;
		if (labId) await sql`update study set lab_id = ${labId} where id = ${other.study.id}`;
		const fillings = await loadFillings(sql, other.study.id, [unknownLink]);
		return { name, isOfLab: labId !== null, fillings, labId: other.lab.id };
	} finally {
		await owner.end();
	}
}

function ask(role: Role | null, asked: readonly Entry[], fillings: Fillings): Promise<Answer[]> {
	const opens = (entry: Entry) => role !== null && mayOpen(role, entry);
	const cookie = role === null ? undefined : cookies.get(role);
	return askEverything({ url: web.url, cookie, entries: asked, opens }, fillings);
}

function mayOpen(role: Role, { guard }: Entry): boolean {
	if (guard === null || guard === 'link') return true;
	const isSteward = role === 'steward';
	const standing: Standing = { isMember: true, isSteward, roles: isSteward ? [] : [role] };
	return isAllowed(guard, standing);
}

function stewardOpens(guard: Entry['guard']): boolean {
	if (guard === null || guard === 'link') return false;
	return isAllowed(guard, { isMember: true, isSteward: true, roles: [] });
}

function scopeOf({ guard }: Entry): string {
	return guard === null || guard === 'link' ? 'anybody' : permissions[guard].scope;
}

const maySee = (role: Role, { item, levels }: Plant) =>
	levels.some((level) => findLevels([role], item).has(level));

const tell = (answer: Answer) => `${statusOf(answer)} ${answer.ask}`;

const asText = ({ status, headers, body }: Answer) => [status, ...headers, body].join('\n');

describe.each(roles)('%s', (role) => {
	it('finds no hidden value in any answer', () => {
		const hidden = plants.filter((plant) => !maySee(role, plant));
		const found = (answers.get(role) ?? []).flatMap((answer) =>
			hidden
				.filter(({ text }) => asText(answer).includes(text))
				.map(({ what }) => `${answer.ask}: ${what}`)
		);
		expect(found).toEqual([]);
	});

	it('finds nothing where the role has nothing to do, and meets no fault elsewhere', () => {
		const shut = entries.filter((entry) => !mayOpen(role, entry)).map(({ path }) => path);
		const wrong = (answers.get(role) ?? []).filter((answer) => {
			const path = answer.ask.split(/\/__data|\?| /)[0] ?? '';
			return shut.includes(path) ? statusOf(answer) !== 404 : statusOf(answer) >= 500;
		});
		expect(wrong.map(tell)).toEqual([]);
	});

	it('finds nothing of studies and labs that are not theirs', async () => {
		const inStudies = entries.filter((entry) => scopeOf(entry) === 'study');
		const inLabs = entries.filter((entry) => scopeOf(entry) === 'lab');
		const opened: string[] = [];
		for (const { name, isOfLab, fillings, labId } of others) {
			const theirs = (entry: Entry) => fillings(entry).slice(0, 1);
			const inLab = (entry: Entry) =>
				own(entry)
					.slice(0, 1)
					.map(({ values }) => ({ says: '', values: { ...values, labId } }));
			// The steward manages the team of every study of the lab.
			const isManaged = (entry: Entry) =>
				role === 'steward' && isOfLab && stewardOpens(entry.guard);
			const shut = inStudies.filter((entry) => !isManaged(entry));
			const asked = [...(await ask(role, shut, theirs)), ...(await ask(role, inLabs, inLab))];
			const seen = asked.filter((answer) => statusOf(answer) !== 404);
			opened.push(...seen.map((answer) => `${name}: ${tell(answer)}`));
		}
		expect(opened).toEqual([]);
	});

	it("finds nothing of another study's people under the address of their own", async () => {
		const inside = entries.filter(
			(entry) => scopeOf(entry) === 'study' && entry.params.length > 1 && mayOpen(role, entry)
		);
		const studyId = own({ path: '', kind: 'page', guard: null, params: [] })[0]?.values.studyId;
		const mixed: Fillings = (entry) =>
			(others[0]?.fillings(entry) ?? [])
				.slice(0, 1)
				.map(({ says, values }) => ({ says, values: { ...values, studyId: studyId ?? '' } }));
		const opened = (await ask(role, inside, mixed)).filter((answer) => statusOf(answer) !== 404);
		expect(opened.map(tell)).toEqual([]);
	});
});

describe('the search', () => {
	it('finds each shown value with a role that may see it', () => {
		const missed = plants.filter(
			(plant) =>
				plant.isShown &&
				!roles.some(
					(role) =>
						maySee(role, plant) &&
						(answers.get(role) ?? []).some((answer) => asText(answer).includes(plant.text))
				)
		);
		expect(missed.map(({ what }) => what)).toEqual([]);
	});
});

describe('somebody who is not signed in', () => {
	it('is sent to the sign-in page by every page, and back afterwards', async () => {
		const guarded = entries.filter(({ guard, kind }) => guard !== null && kind === 'page');
		const replies = await ask(null, guarded, own);
		const wrong = replies.filter(({ ask: asked, status, headers, body }) =>
			asked.includes('/__data.json')
				? !body.includes('"type":"redirect"') || !body.includes('/signin?to=')
				: status !== 303 || !headers.some((line) => line.startsWith('location: /signin?to='))
		);
		expect(wrong.map(tell)).toEqual([]);
	});

	it('gets nothing from an endpoint', async () => {
		const guarded = entries.filter(({ guard, kind }) => guard !== null && kind === 'endpoint');
		const replies = await ask(null, guarded, own);
		expect(replies.filter(({ status }) => status === 200).map(({ ask: asked }) => asked)).toEqual(
			[]
		);
	});
});

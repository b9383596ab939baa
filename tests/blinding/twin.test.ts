import postgres from 'postgres';
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import { isAllowed, type Standing } from '$lib/server/access/permissions';
import { at } from '$lib/server/demo/seed/demo-time';
import { team } from '$lib/server/demo/seed/cast';
import { createDatabase } from '../support/create-database';
import { askEverything, signInAll, type Answer } from '../support/twin/ask-everything';
import { findDifferences } from '../support/twin/compare-answers';
import { loadFillings } from '../support/twin/fillings';
import { listEntries, type Entry } from '../support/twin/list-entries';
import { playStudy, type Moment, type Played } from '../support/twin/played-study';
import { readMails } from '../support/twin/read-mails';
import { openHome, startWeb, type Home } from '../support/twin/web-server';

const drawnHere = vi.hoisted(() => ({ count: 0 }));

/** What a play draws: the nth id, and the nth link of a mail, are the same in both plays. */
vi.mock('node:crypto', async (original) => {
	const real = await original<typeof import('node:crypto')>();
	return {
		...real,
		randomUUID: () => {
			const hex = real
				.createHash('md5')
				.update(`drawn ${(drawnHere.count += 1)}`)
				.digest('hex');
			return hex.replace(/^(.{8})(.{4}).(.{3}).(.{3})(.{12}).*$/, '$1-$2-4$3-8$4-$5');
		}
	};
});

vi.mock('$lib/server/mail/mail-link', async (original) => {
	const real = await original<typeof import('$lib/server/mail/mail-link')>();
	const { createHash } = await vi.importActual<typeof import('node:crypto')>('node:crypto');
	return {
		...real,
		makeLinkToken: () => {
			const name = `link ${(drawnHere.count += 1)}`;
			const token = createHash('sha256').update(name).digest('base64url');
			return { token, tokenHash: real.hashLinkToken(token) };
		}
	};
});

const blinded = ['coordinator', 'operator', 'statistician', 'investigator', 'monitor', 'steward'];
const seeing = ['approver', 'unblinded'];

const moments: [Moment, Moment, Moment] = [
	{ name: 'a held decision waits', atMs: at('2027-03-01', '11:16') + 30_000 },
	{ name: 'a block is ready inside a visit', atMs: at('2027-03-02', '11:00') + 30_000 },
	{ name: 'the hour of a fallback has passed', atMs: at('2027-03-03', '09:00') + 30_000 }
];

type Seen = {
	/** Answers by reader and moment. */
	answers: Map<string, Answer[]>;
	/** Each person's arm and decisions, to see that the twins differ. */
	hidden: Map<string, string[]>;
};

let twins: [Seen, Seen];

async function play(arms: [string, string]): Promise<Seen> {
	drawnHere.count = 0;
	const database = await createDatabase();
	const home = openHome(database);
	const sql = postgres(database.ownerUrl, { max: 2, onnotice: () => {} });
	const seen: Seen = { answers: new Map(), hidden: new Map() };
	try {
		const look = (played: Played, moment: Moment) =>
			lookAround({ played, moment, home, sql, seen });
		await playStudy({ database, home, arms, moments, look });
		return seen;
	} finally {
		await sql.end();
		await database.drop();
		home.remove();
	}
}

type Look = { played: Played; moment: Moment; home: Home; sql: postgres.Sql; seen: Seen };

async function lookAround({ played, moment, home, sql, seen }: Look): Promise<void> {
	const { world, studyId } = played;
	const { mails, links } = await readMails(sql, world.keys);
	seen.answers.set(`mails, ${moment.name}`, mails);
	seen.hidden.set(moment.name, await readHidden(sql));
	const fillingsOf = await loadFillings(sql, studyId, links);
	const idOf = (key: string) => world.people.get(key)?.id ?? '';
	const cookies = await signInAll(
		sql,
		team.map(({ key }) => idOf(key))
	);
	const web = await startWeb(home, moment.atMs);
	try {
		const entries = listEntries();
		const own = entries.filter(({ guard }) => guard !== 'link');
		for (const { key, role } of team) {
			if (seeing.includes(key) && moment !== moments[2]) continue;
			const opens = ({ guard }: Entry) =>
				guard === null || guard === 'link' || isAllowed(guard, standingOf(role));
			const question = { url: web.url, cookie: cookies.get(idOf(key)), entries: own, opens };
			const answers = await askEverything(question, fillingsOf);
			seen.answers.set(`${key}, ${moment.name}`, answers);
		}
		const byLink = entries.filter(({ guard }) => guard === 'link');
		const question = { url: web.url, cookie: undefined, entries: byLink, opens: () => true };
		seen.answers.set(`links, ${moment.name}`, await askEverything(question, fillingsOf));
	} finally {
		await web.stop();
	}
}

function standingOf(role: (typeof team)[number]['role']): Standing {
	const isSteward = role === 'steward';
	return { isMember: true, isSteward, roles: isSteward ? [] : [role] };
}

async function readHidden(sql: postgres.Sql): Promise<string[]> {
	const rows = await sql<{ line: string }[]>`
		select concat_ws(' ', p.code, a.arm, (
			select string_agg(concat_ws(' ', d.visit_number, d.block_number, d.kind, d.code, d.state,
				s.action), ', ' order by d.visit_number, d.block_number)
			from decision d left join settlement s on s.decision_id = d.id
			where d.participant_id = p.id)) as line
		from participant p left join allocation a on a.participant_id = p.id order by p.code`;
	return rows.map(({ line }) => line);
}

beforeAll(async () => {
	twins = [await play(['adaptive', 'fixed']), await play(['fixed', 'adaptive'])];
}, 1_200_000);

afterAll(() => vi.restoreAllMocks());

const compare = (reader: string, when: readonly Moment[] = moments) =>
	when.flatMap(({ name }) => {
		const key = `${reader}, ${name}`;
		const [first, second] = twins.map(({ answers }) => answers.get(key) ?? []);
		expect(first?.length, `what ${key} was told`).toBeGreaterThan(0);
		return findDifferences(first ?? [], second ?? []).map((line) => `${name}: ${line}`);
	});

describe('two databases alike but for arms swapped between people', () => {
	it('differ in arms, decisions and settlements', () => {
		const [first, second] = twins.map(({ hidden }) =>
			moments.map(({ name }) => (hidden.get(name) ?? []).join('\n'))
		);
		const otherArms = { adaptive: 'fixed', fixed: 'adaptive' };
		const armsOf = (text = '') => text.match(/(?<=^TW-\d+ )\w+/gm) as (keyof typeof otherArms)[];
		expect(armsOf(first?.[2])).toHaveLength(6);
		expect(armsOf(second?.[2])).toEqual(armsOf(first?.[2]).map((arm) => otherArms[arm]));
		expect([first?.[0]?.includes('held'), second?.[0]?.includes('held')]).toEqual([true, false]);
		expect([first?.[2]?.includes('use'), second?.[2]?.includes('use')]).toEqual([true, false]);
		expect([first?.[2]?.includes('fallback'), second?.[2]?.includes('fallback')]).toEqual([
			false,
			true
		]);
	});

	it.each([...blinded, 'links', 'mails'])('give %s the same bytes', (reader) => {
		expect(compare(reader)).toEqual([]);
	});

	it.each(seeing)('give %s, who sees arms, other bytes', (reader) => {
		expect(compare(reader, [moments[2]])).not.toEqual([]);
	});
});

describe('the comparison', () => {
	const leaks: [string, (answer: Answer) => Answer][] = [
		['two rows in another order', (answer) => swapTexts(answer, 'TW-002', 'TW-005')],
		['two ids that changed places', (answer) => swapTexts(answer, ...twoIds(answer))],
		['one character more', (answer) => ({ ...answer, body: `${answer.body} ` })],
		['another status', (answer) => ({ ...answer, status: 404 })],
		['another header', (answer) => ({ ...answer, headers: [...answer.headers, 'x-arm: a'] })]
	];

	it.each(leaks)('notices %s', (_, leak) => {
		const told = twins[0].answers.get(`coordinator, ${moments[0].name}`) ?? [];
		const rows = told.findIndex(({ ask }) => ask === 'studies/[studyId]/people/rows');
		expect(told[rows]?.body).toContain('TW-005');
		const leaking = told.map((answer, index) => (index === rows ? leak(answer) : answer));
		expect(findDifferences(told, told)).toEqual([]);
		expect(findDifferences(told, leaking)).toHaveLength(1);
	});

	it('notices a sealed file of another length, and a missing answer', () => {
		const file = (length: number) => `eyJhbGci.${'a'.repeat(length)}.bbbb.cccc.dddd`;
		const answer = { ask: 'file', status: 200, headers: [], body: file(40) };
		const drawnAgain = { ...answer, body: file(40).replace(/a/g, 'e') };
		expect(findDifferences([answer], [drawnAgain])).toEqual([]);
		expect(findDifferences([answer], [{ ...answer, body: file(41) }])).toHaveLength(1);
		expect(findDifferences([answer], [])).toHaveLength(1);
	});
});

function swapTexts(answer: Answer, one: string, other: string): Answer {
	const body = answer.body.replaceAll(one, '#').replaceAll(other, one).replaceAll('#', other);
	return { ...answer, body };
}

function twoIds({ body }: Answer): [string, string] {
	const [one = '', other = ''] = new Set(body.match(/(?<="id":")[0-9a-f-]{36}/g));
	return [one, other];
}

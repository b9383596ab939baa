import { createHash } from 'node:crypto';
import type postgres from 'postgres';
import { peopleViews } from '$lib/people/people-list';
import type { Entry } from './list-entries';

/** One value for each name in brackets, and words that say which they are. */
export type Filling = { says: string; values: Record<string, string> };

/** What a server answered: everything of it that a reader could tell apart. */
export type Answer = {
	/** What was asked, in words that do not depend on random ids. */
	ask: string;
	status: number;
	headers: string[];
	body: string;
};

const queries: Record<string, string[]> = {
	'studies/[studyId]/people': ['', ...peopleViews.map((view) => `?view=${view}`), '?find=TW-002'],
	'studies/[studyId]/protocol': ['', '?version=1', '?version=4'],
	'studies/[studyId]/power/script': ['?version=4']
};

/** A signed-in browser of each person; the cookie's value by person. */
export async function signInAll(
	sql: postgres.Sql,
	personIds: readonly string[]
): Promise<Map<string, string>> {
	const cookies = new Map<string, string>();
	for (const personId of personIds) {
		const token = createHash('sha256').update(`browser of ${personId}`).digest('base64url');
		const kept = createHash('sha256').update(token).digest('hex');
		await sql`insert into session (session_token, person_id, expires, started_at, browser)
			values (${kept}, ${personId}, '2099-01-01', '2027-01-01', 'A test') on conflict do nothing`;
		cookies.set(personId, `authjs.session-token=${token}`);
	}
	return cookies;
}

type Question = {
	url: string;
	cookie: string | undefined;
	entries: readonly Entry[];
	/** Whether the reader's role opens an entry; one that it does not is asked once, not per filling. */
	opens: (entry: Entry) => boolean;
};
type FillingsOf = (entry: Entry) => readonly Filling[];

/** Asks every entry with every filling; a page twice, as HTML and as the data it is made from. */
export async function askEverything(
	{ url, cookie, entries, opens }: Question,
	fillingsOf: FillingsOf
): Promise<Answer[]> {
	const asks = entries.flatMap((entry) => {
		if (opens(entry)) return fillingsOf(entry).flatMap((filling) => listAsks(entry, filling));
		const [first] = fillingsOf(entry);
		return first ? listAsks(entry, first).slice(0, 2) : [];
	});
	// One after another: opening contact data is recorded, and the record shows in which order.
	const answers: Answer[] = [];
	for (const { ask, path, accept } of asks) {
		answers.push({ ask, ...(await fetchAnswer(url + path, cookie, accept)) });
	}
	return answers;
}

type Ask = { ask: string; path: string; accept: string };

function listAsks(entry: Entry, { says, values }: Filling): Ask[] {
	const folder = entry.path === '' ? '' : `/${fillPath(entry.path, values)}`;
	const forms = entry.kind === 'page' ? ['', '/__data.json'] : [''];
	return (queries[entry.path] ?? ['']).flatMap((query) =>
		forms.map((form) => ({
			ask: `${entry.path}${form}${query} ${says}`.trim(),
			accept: entry.kind === 'page' ? 'text/html' : 'application/json',
			path: `${folder}${form}` === '' ? `/${query}` : `${folder}${form}${query}`
		}))
	);
}

function fillPath(path: string, values: Record<string, string>): string {
	return path.replace(/\[(\w+)\]/g, (_, name: string) => {
		const value = values[name];
		if (value === undefined) throw new RangeError(`say what [${name}] of ${path} stands for`);
		return encodeURIComponent(value);
	});
}

/** Headers that a server makes from the moment or from the bytes themselves. */
const madeByTheMoment = new Set(['date', 'etag', 'connection', 'keep-alive', 'last-modified']);

async function fetchAnswer(address: string, cookie: string | undefined, accept: string) {
	const reply = await fetch(address, {
		redirect: 'manual',
		headers: cookie ? { cookie, accept } : { accept }
	});
	const bytes = Buffer.from(await reply.arrayBuffer());
	const headers = [...reply.headers]
		.filter(([name]) => !madeByTheMoment.has(name))
		.map(([name, value]) => `${name}: ${value}`);
	return { status: reply.status, headers: headers.sort(), body: bytes.toString('utf8') };
}

/** The status that the reader gets to see: a page's data tells of a refusal in its body. */
export function statusOf({ ask, status, body }: Answer): number {
	if (!ask.includes('/__data.json') || status !== 200) return status;
	if (body.includes('"type":"redirect"')) return 303;
	const refused = /"type":"error".*"status":(\d{3})/s.exec(body)?.[1];
	return refused === undefined ? status : Number(refused);
}

import { createHash, randomBytes } from 'node:crypto';
import { afterAll, afterEach, beforeAll, expect, test } from 'vitest';
import { createClock } from '$lib/server/clock';
import { openDatabase, type DatabaseHandle } from '$lib/server/db/client';
import { lab, membership, person, recordEvent, setupLink } from '$lib/server/db/schema';
import { checkSetupLink, setUpLab } from '$lib/server/setup/set-up-lab';
import { createDatabase, type TestDatabase } from '../support/create-database';

let database: TestDatabase;
let app: DatabaseHandle;
let owner: DatabaseHandle;
const clock = createClock(0);
const facts = {
	personName: 'Sigrid Tangen',
	personEmail: 'sigrid@fjordview.example',
	name: 'Fjordview Lab',
	zone: 'Europe/Oslo',
	address: 'Quay Street 4',
	phone: ''
};

beforeAll(async () => {
	database = await createDatabase();
	app = openDatabase(database.appUrl, { max: 12 });
	owner = openDatabase(database.ownerUrl);
});
afterEach(async () => {
	for (const table of [membership, lab, person, setupLink]) await owner.db.delete(table);
});
afterAll(async () => {
	await app.end();
	await owner.end();
	await database.drop();
});

async function plantLink(minutesLeft: number): Promise<string> {
	const token = randomBytes(32).toString('base64url');
	await owner.db.insert(setupLink).values({
		tokenHash: createHash('sha256').update(token).digest(),
		expiresAt: new Date(Date.now() + minutesLeft * 60_000)
	});
	return token;
}

test('the link makes the lab and its first steward, who is a member at once', async () => {
	const token = await plantLink(30);
	expect(await checkSetupLink(app.db, token)).toBe('open');
	const answer = await setUpLab(app.db, clock, { token, facts });
	expect(answer.ok).toBe(true);
	const [made] = await app.db.select().from(membership);
	expect(made).toMatchObject({ isSteward: true, endedAt: null });
	expect(made?.acceptedAt).not.toBeNull();
	const [place] = await app.db.select().from(lab);
	expect(place).toMatchObject({ name: 'Fjordview Lab', zone: 'Europe/Oslo' });
	const events = await app.db.select().from(recordEvent);
	expect(events.at(-1)).toMatchObject({ kind: 'lab-set-up', labId: place?.id });
	expect(events.at(-1)?.body).not.toContain('sigrid@');
});

test('it works once', async () => {
	const token = await plantLink(30);
	await setUpLab(app.db, clock, { token, facts });
	expect(await checkSetupLink(app.db, token)).toBe('used');
	expect(await setUpLab(app.db, clock, { token, facts })).toEqual({ ok: false, reason: 'used' });
	expect(await app.db.select().from(lab)).toHaveLength(1);
});

test('of several people who press at once, one sets up the lab', async () => {
	const tokens = await Promise.all([plantLink(30), plantLink(30)]);
	const answers = await Promise.all(
		Array.from({ length: 8 }, (_, index) =>
			setUpLab(app.db, clock, {
				token: tokens[index % 2] ?? '',
				facts: { ...facts, personEmail: `person${index}@fjordview.example` }
			})
		)
	);
	expect(answers.filter((answer) => answer.ok)).toHaveLength(1);
	expect(await app.db.select().from(lab)).toHaveLength(1);
	expect(await app.db.select().from(person)).toHaveLength(1);
});

test('it says when it is too old, and changes nothing', async () => {
	const token = await plantLink(-1);
	expect(await checkSetupLink(app.db, token)).toBe('expired');
	expect(await setUpLab(app.db, clock, { token, facts })).toEqual({ ok: false, reason: 'expired' });
	expect(await app.db.select().from(lab)).toEqual([]);
});

test('another link is used up as soon as there is a lab', async () => {
	const [first, other] = [await plantLink(30), await plantLink(30)];
	await setUpLab(app.db, clock, { token: first, facts });
	expect(await checkSetupLink(app.db, other)).toBe('used');
});

test.each(['', 'x', randomBytes(32).toString('base64url')])(
	'an unknown token (%j) is none',
	async (token) => {
		expect(await checkSetupLink(app.db, token)).toBe('unknown');
		expect(await setUpLab(app.db, clock, { token, facts })).toEqual({
			ok: false,
			reason: 'unknown'
		});
	}
);

test('the token itself is not in the database', async () => {
	const token = await plantLink(30);
	const rows = JSON.stringify(await owner.db.select().from(setupLink));
	expect(rows).not.toContain(token);
});

import { createHash, randomBytes, randomUUID } from 'node:crypto';
import { and, eq } from 'drizzle-orm';
import { simpleParser } from 'mailparser';
import pino from 'pino';
import { afterAll, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import { createAuthAdapter } from '$lib/server/auth/auth-adapter';
import { sendSignInLink } from '$lib/server/auth/send-sign-in-link';
import {
	endOwnSession,
	endSession,
	endSessionsOf,
	findSessionPerson,
	listOwnSessions,
	startSession
} from '$lib/server/auth/sessions';
import { createClock } from '$lib/server/clock';
import { parseSettings, type Settings } from '$lib/server/config';
import { openDatabase, type Database, type DatabaseHandle } from '$lib/server/db/client';
import {
	account,
	membership,
	recordEvent,
	session,
	staff,
	studyRole,
	verificationToken
} from '$lib/server/db/schema';
import { inviteMember, resendInvitation } from '$lib/server/members/invite-member';
import { listMembers } from '$lib/server/members/list-members';
import { removeMember, setSteward } from '$lib/server/members/remove-member';
import { createDatabase, type TestDatabase } from '../support/create-database';
import {
	plantBareStudy,
	plantEmptyLab,
	plantPerson,
	type PlantedPerson
} from '../support/plant-person';
import { startTestMailServer } from '../support/test-mail-server';

let database: TestDatabase;
let app: DatabaseHandle;
let owner: DatabaseHandle;
let db: Database;
let mails: Awaited<ReturnType<typeof startTestMailServer>>;
let settings: Settings;
const clock = createClock(0);
let labId: string;
let steward: PlantedPerson;
const manage = () => steward.grantFor('lab:manage', { labId });
const log = pino({ level: 'silent' });
const place = () => ({ db, clock, settings, log });
const browser = 'Mozilla/5.0 (X11; Linux x86_64; rv:140.0) Gecko/20100101 Firefox/140.0';

beforeAll(async () => {
	database = await createDatabase();
	app = openDatabase(database.appUrl);
	owner = openDatabase(database.ownerUrl);
	db = app.db;
	mails = await startTestMailServer();
	const key = randomBytes(32).toString('base64url');
	settings = parseSettings({
		ORIGIN: 'https://ovalry.fjordview.example',
		DATABASE_URL: database.appUrl,
		AUTH_SECRET: 'a secret for tests, which is long enough',
		OVALRY_KEYS: '/nowhere',
		OVALRY_WRAPPING_KEY: key,
		OVALRY_ALLOCATION_KEY: key,
		OVALRY_MAILBOX_SMTP_PORT: String(mails.mailServer.port),
		LOG_LEVEL: 'silent'
	});
});
beforeEach(async () => {
	labId = await plantEmptyLab(owner.db);
	steward = await plantPerson(owner.db, 'Sigrid Steward', { labId, isSteward: true });
});
afterAll(async () => {
	await mails.close();
	await app.end();
	await owner.end();
	await database.drop();
});

const newestMailTo = async (address: string) => {
	const found = mails.taken.filter(({ to }) => to.includes(address)).at(-1);
	return found ? simpleParser(found.raw) : null;
};
const linkOf = (text: string | undefined): URL =>
	new URL(/https:\/\/ovalry\.fjordview\.example\S+/.exec(text ?? '')?.[0] ?? 'none:');

describe('a session', () => {
	test('is found by its token, which the database does not hold', async () => {
		const { token } = await startSession(db, { personId: steward.id, userAgent: browser });
		expect(await findSessionPerson(db, token)).toMatchObject({ id: steward.id });
		const rows = await db.select().from(session).where(eq(session.userId, steward.id));
		expect(JSON.stringify(rows)).not.toContain(token);
		expect(rows[0]).toMatchObject({ browser: 'Firefox on Linux' });
	});

	test('is nobody’s once it has ended or expired', async () => {
		const { token } = await startSession(db, { personId: steward.id, userAgent: '' });
		await endSession(db, token);
		expect(await findSessionPerson(db, token)).toBe(null);
		const late = await startSession(db, { personId: steward.id, userAgent: '' });
		const inTwelveHours = late.expiresAt.getTime() - Date.now();
		expect(inTwelveHours).toBeGreaterThan(11.9 * 3_600_000);
		expect(inTwelveHours).toBeLessThanOrEqual(12 * 3_600_000);
		await db
			.update(session)
			.set({ expires: new Date(Date.now() - 1) })
			.where(eq(session.userId, steward.id));
		expect(await findSessionPerson(db, late.token)).toBe(null);
	});

	test('can be ended from another browser, but only by its own person', async () => {
		const here = await startSession(db, { personId: steward.id, userAgent: browser });
		const there = await startSession(db, { personId: steward.id, userAgent: '' });
		const otto = await plantPerson(owner.db, 'Otto', { labId });
		const grant = await steward.grantFor('account:manage');
		const list = await listOwnSessions(db, grant, here.token);
		expect(list.map(({ isThisOne }) => isThisOne).toSorted()).toEqual([false, true]);
		const other = list.find(({ isThisOne }) => !isThisOne)?.id ?? '';
		await endOwnSession(db, await otto.grantFor('account:manage'), other);
		expect(await findSessionPerson(db, there.token)).not.toBe(null);
		await endOwnSession(db, grant, other);
		expect(await findSessionPerson(db, there.token)).toBe(null);
		expect(await findSessionPerson(db, here.token)).not.toBe(null);
		await endSessionsOf(db, steward.id);
		expect(await findSessionPerson(db, here.token)).toBe(null);
	});
});

describe('what signs people in', () => {
	test('makes nobody, and finds people whatever the case of their address', async () => {
		const adapter = createAuthAdapter(db, browser);
		const found = await adapter.getUserByEmail?.(` ${steward.email.toUpperCase()} `);
		expect(found?.id).toBe(steward.id);
		const stranger = { id: randomUUID(), email: 'stranger@lab.example', emailVerified: null };
		expect(() => adapter.createUser?.(stranger)).toThrow('invited by a steward');
	});

	test('keeps no token of another institution', async () => {
		const adapter = createAuthAdapter(db, browser);
		await adapter.linkAccount?.({
			userId: steward.id,
			type: 'oidc',
			provider: 'university',
			providerAccountId: randomUUID(),
			access_token: 'their-access',
			id_token: 'their-identity',
			refresh_token: 'their-refresh'
		});
		const [row] = await db.select().from(account).where(eq(account.userId, steward.id));
		expect(row?.provider).toBe('university');
		expect(JSON.stringify(row)).not.toContain('their-');
	});

	test('joins nothing to whoever is signed in already', async () => {
		const { token } = await startSession(db, { personId: steward.id, userAgent: '' });
		expect(await createAuthAdapter(db, browser).getSessionAndUser?.(token)).toBe(null);
	});
});

describe('a sign-in link', () => {
	const ask = (email: string) =>
		sendSignInLink({
			db,
			settings,
			email,
			callbackUrl: `http://attacker.example/auth/callback/nodemailer?callbackUrl=%2Fhome&token=abc&email=${email}`
		});

	test('goes to members, on this site’s own address whatever the request said', async () => {
		await ask(steward.email);
		const mail = await newestMailTo(steward.email);
		const link = linkOf(mail?.text);
		expect(link.pathname).toBe('/signin/confirm');
		expect(link.searchParams.get('token')).toBe('abc');
		expect(mail?.text).not.toContain('attacker');
	});

	test('goes neither to strangers nor to people who left', async () => {
		const gone = await plantPerson(owner.db, 'Gone', { labId });
		await owner.db
			.update(membership)
			.set({ endedAt: new Date() })
			.where(eq(membership.personId, gone.id));
		const count = mails.taken.length;
		await ask(gone.email);
		await ask('nobody@elsewhere.example');
		expect(mails.taken.length).toBe(count);
	});
});

describe('inviting a member', () => {
	const invite = async (email: string, name = 'Milo Reyes') =>
		inviteMember(place(), await manage(), { name, email, isSteward: false });

	test('writes person and membership, and mails a link that signs in', async () => {
		const email = `milo.${randomUUID()}@lab.example`;
		const answer = await invite(email);
		expect(answer).toMatchObject({ ok: true, wasMailed: true });
		const found = (await listMembers(db, await manage())).find((one) => one.email === email);
		expect(found).toMatchObject({ name: 'Milo Reyes', isSteward: false, acceptedAt: null });
		const link = linkOf((await newestMailTo(email))?.text);
		expect(link.pathname).toBe('/signin/confirm');
		const token = link.searchParams.get('token') ?? '';
		const kept = createHash('sha256').update(`${token}${settings.AUTH_SECRET}`).digest('hex');
		const [row] = await db
			.select()
			.from(verificationToken)
			.where(and(eq(verificationToken.identifier, email), eq(verificationToken.token, kept)));
		const days = ((row?.expires.getTime() ?? 0) - Date.now()) / 86_400_000;
		expect(days).toBeGreaterThan(6.9);
		expect(days).toBeLessThanOrEqual(7);
		const events = await db.select().from(recordEvent).where(eq(recordEvent.labId, labId));
		expect(events.at(-1)?.kind).toBe('member-invited');
		expect(events.at(-1)?.body).not.toContain(email);
	});

	test('is refused for a member, and said so', async () => {
		expect(await invite(steward.email)).toEqual({ ok: false, reason: 'is-member' });
	});

	test('of somebody known from another lab keeps their own name', async () => {
		const otherLab = await plantEmptyLab(owner.db, 'Other');
		const otto = await plantPerson(owner.db, 'Otto Other', { labId: otherLab });
		const answer = await invite(otto.email, 'Wrong Name');
		expect(answer).toMatchObject({ ok: true, personId: otto.id });
		const found = (await listMembers(db, await manage())).find((one) => one.email === otto.email);
		expect(found?.name).toBe('Otto Other');
	});

	test('keeps the member when the mail server does not answer, and can be mailed again', async () => {
		const email = `nia.${randomUUID()}@lab.example`;
		const unreachable = { ...settings, OVALRY_MAILBOX_SMTP_PORT: 1 };
		const answer = await inviteMember({ ...place(), settings: unreachable }, await manage(), {
			name: 'Nia',
			email,
			isSteward: false
		});
		expect(answer).toMatchObject({ ok: true, wasMailed: false });
		const personId = answer.ok ? answer.personId : '';
		expect(await newestMailTo(email)).toBe(null);
		expect(await resendInvitation(place(), await manage(), personId)).toEqual({ ok: true });
		expect((await newestMailTo(email))?.subject).toContain('Fjordview Lab');
	});
});

describe('removing a member', () => {
	test('ends sessions, roles and bookable hours at once, and keeps what was', async () => {
		const milo = await plantPerson(owner.db, 'Milo', { labId });
		const studyId = await plantBareStudy(owner.db, { labId, createdBy: steward.id });
		await owner.db
			.insert(studyRole)
			.values({ studyId, personId: milo.id, role: 'coordinator', givenBy: steward.id });
		await owner.db.insert(staff).values({ labId, personId: milo.id, name: 'Milo' });
		const { token } = await startSession(db, { personId: milo.id, userAgent: '' });
		await milo.grantFor('participant:list', { studyId });
		expect(await removeMember(db, clock, await manage(), milo.id)).toEqual({ ok: true });
		expect(await findSessionPerson(db, token)).toBe(null);
		await expect(milo.grantFor('participant:list', { studyId })).rejects.toMatchObject({
			status: 404
		});
		await expect(milo.grantFor('lab:read', { labId })).rejects.toMatchObject({ status: 404 });
		const [role] = await db.select().from(studyRole).where(eq(studyRole.personId, milo.id));
		expect(role?.endedAt).not.toBe(null);
		const [row] = await db.select().from(staff).where(eq(staff.personId, milo.id));
		expect(row?.endedAt).not.toBe(null);
		const kinds = (await db.select().from(recordEvent).where(eq(recordEvent.labId, labId))).map(
			({ kind }) => kind
		);
		expect(kinds).toEqual(['role-ended', 'member-removed']);
	});

	test('and inviting them again gives membership back, no role', async () => {
		const milo = await plantPerson(owner.db, 'Milo', { labId });
		const studyId = await plantBareStudy(owner.db, { labId, createdBy: steward.id });
		await owner.db
			.insert(studyRole)
			.values({ studyId, personId: milo.id, role: 'operator', givenBy: steward.id });
		await removeMember(db, clock, await manage(), milo.id);
		const again = { name: 'Milo', email: milo.email, isSteward: false };
		expect(await inviteMember(place(), await manage(), again)).toMatchObject({ ok: true });
		await milo.grantFor('lab:read', { labId });
		await expect(milo.grantFor('visit:run', { studyId })).rejects.toMatchObject({ status: 404 });
	});

	test('is refused for the last steward, also when two leave at once', async () => {
		expect(await removeMember(db, clock, await manage(), steward.id)).toEqual({
			ok: false,
			reason: 'last-steward'
		});
		const otto = await plantPerson(owner.db, 'Otto', { labId });
		const grant = await manage();
		expect(await setSteward(db, clock, grant, { personId: otto.id, isSteward: true })).toEqual({
			ok: true
		});
		const answers = await Promise.all([
			removeMember(db, clock, grant, steward.id),
			removeMember(db, clock, grant, otto.id)
		]);
		expect(answers.filter((answer) => answer.ok)).toHaveLength(1);
		const left = await db
			.select()
			.from(membership)
			.where(and(eq(membership.labId, labId), eq(membership.isSteward, true)));
		expect(left.filter((row) => !row.endedAt)).toHaveLength(1);
	});
});

import { randomUUID } from 'node:crypto';
import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { openDatabase, type DatabaseHandle } from '$lib/server/db/client';
import { lab, membership, person, session } from '$lib/server/db/schema';
import { startApp, type AppServer } from '../support/app-server';
import { findAxeFaults } from '../support/axe';
import { openBrowser, type Screen, type TestBrowser } from '../support/browser';
import { linkIn } from '../support/mailbox';
import { keepScreenshot } from '../support/screenshot';

describe('signing in', () => {
	let app: AppServer;
	let owner: DatabaseHandle;
	let browser: TestBrowser;
	let screen: Screen;
	const labId = randomUUID();
	const people = { mira: randomUUID(), noor: randomUUID() };

	beforeAll(async () => {
		app = await startApp('rehearsal');
		owner = openDatabase(app.database.ownerUrl, { max: 2 });
		browser = await openBrowser();
		screen = await browser.openScreen();
		const { db } = owner;
		await db.insert(lab).values({ id: labId, name: 'Fjordview Lab', zone: 'Europe/Oslo' });
		await db.insert(person).values([
			{ id: people.mira, name: 'Mira Solberg', email: 'mira@fjordview.example' },
			{ id: people.noor, name: 'Noor Haddad', email: 'noor@fjordview.example' }
		]);
		await db.insert(membership).values([
			{ labId, personId: people.mira, isSteward: true },
			{ labId, personId: people.noor }
		]);
	});
	afterAll(async () => {
		await browser.close();
		await owner.end();
		await app.stop();
	});

	const askForLink = async (page: Screen['page'], address: string) => {
		await page.getByRole('textbox', { name: 'E-mail address' }).fill(address);
		await page.getByRole('button', { name: 'Send me a sign-in link' }).click();
		await page.getByText('If the address belongs to a member').waitFor();
	};
	const countSessions = async (personId: string) =>
		(await owner.db.select().from(session).where(eq(session.userId, personId))).length;

	test('a deep link leads to the sign-in page and, by the mailed link, back to itself', async () => {
		const { page } = screen;
		await page.goto(`${app.origin}/lab/${labId}/members?view=all`);
		expect(page.url()).toContain('/signin?to=');
		await keepScreenshot(page, 'sign-in');
		expect(await findAxeFaults(page)).toEqual([]);
		await askForLink(page, ' Mira@FJORDVIEW.example ');
		const mail = await app.mailbox.waitFor('mira@fjordview.example');
		const link = linkIn(mail, /signin\/confirm/);
		const opened = await page.goto(link);
		expect(opened?.headers()['referrer-policy']).toBe('no-referrer');
		expect(await countSessions(people.mira)).toBe(0);
		await keepScreenshot(page, 'sign-in-confirm');
		expect(await findAxeFaults(page)).toEqual([]);
		await page.getByRole('button', { name: 'Sign in' }).click();
		await page.waitForURL(`${app.origin}/lab/${labId}/members?view=all`);
		expect(await countSessions(people.mira)).toBe(1);
	});

	test('a link that was used says so, and keeps where it was to lead', async () => {
		const other = await browser.openScreen();
		const mail = await app.mailbox.waitFor('mira@fjordview.example');
		await other.page.goto(linkIn(mail, /signin\/confirm/));
		await other.page.getByRole('button', { name: 'Sign in' }).click();
		await other.page.getByText('This link does not work any more').waitFor();
		expect(new URL(other.page.url()).searchParams.get('to')).toBe(`/lab/${labId}/members?view=all`);
		await other.close();
	});

	test('a program that fetches every address of a mail uses nothing up', async () => {
		const other = await browser.openScreen();
		await other.page.goto(`${app.origin}/signin`);
		await askForLink(other.page, 'noor@fjordview.example');
		const link = linkIn(await app.mailbox.waitFor('noor@fjordview.example'), /signin\/confirm/);
		for (const method of ['GET', 'HEAD', 'GET']) await fetch(link, { method });
		await other.page.goto(link);
		await other.page.getByRole('button', { name: 'Sign in' }).click();
		await other.page.getByText('Good to see you, Noor').waitFor();
		await other.close();
	});

	test('all of it works without script, signing out as well', async () => {
		const plain = await browser.openScreen({ javaScript: false });
		const { page } = plain;
		await page.goto(`${app.origin}/lab/${labId}/staff`);
		await askForLink(page, 'noor@fjordview.example');
		const count = (await app.mailbox.list('noor@fjordview.example')).length;
		const mail = await app.mailbox.waitFor('noor@fjordview.example', () => count > 0);
		await page.goto(linkIn(mail, /signin\/confirm/));
		await page.getByRole('button', { name: 'Sign in' }).click();
		await page.waitForURL(`${app.origin}/lab/${labId}/staff`);
		await page.locator('summary', { hasText: 'Noor' }).click();
		await page.getByRole('button', { name: 'Sign out' }).click();
		await page.waitForURL(`${app.origin}/`);
		await page.goto(`${app.origin}/lab/${labId}/staff`);
		expect(page.url()).toContain('/signin?to=');
		await plain.close();
	});

	test('an unknown address sees the same page and gets no mail', async () => {
		const other = await browser.openScreen();
		await other.page.goto(`${app.origin}/signin`);
		await askForLink(other.page, 'nobody@elsewhere.example');
		expect(await app.mailbox.arrivalsWithin(1_500, 'nobody@elsewhere.example')).toEqual([]);
		await other.close();
	});

	test('the university’s sign-on lets members in, by their verified address', async () => {
		const other = await browser.openScreen();
		await other.page.goto(`${app.origin}/signin?to=/lab/${labId}`);
		await other.page.getByRole('button', { name: /^Sign in with/ }).click();
		await other.page.getByLabel('E-mail address').fill('mira@fjordview.example');
		await other.page.getByRole('button', { name: 'Sign in with this address' }).click();
		await other.page.waitForURL(`${app.origin}/lab/${labId}`);
		await other.page.getByRole('heading', { name: 'Fjordview Lab' }).waitFor();
		expect(other.complaints).toEqual([]);
		await other.close();
	});

	test('the university’s sign-on makes nobody a member', async () => {
		const other = await browser.openScreen();
		await other.page.goto(`${app.origin}/signin`);
		await other.page.getByRole('button', { name: /^Sign in with/ }).click();
		await other.page.getByLabel('E-mail address').fill('stranger@fjordview.example');
		await other.page.getByRole('button', { name: 'Sign in with this address' }).click();
		await other.page.getByText('This address belongs to no lab here').waitFor();
		const found = await owner.db.select().from(person);
		expect(found.map(({ email }) => email).toSorted()).toEqual([
			'mira@fjordview.example',
			'noor@fjordview.example'
		]);
		await other.close();
	});

	test('another site’s address is no place to go on to', async () => {
		const { page } = screen;
		await page.goto(`${app.origin}/signin?to=https://elsewhere.example/`);
		await page.waitForURL(`${app.origin}/home`);
		await page.goto(`${app.origin}/signin?to=//elsewhere.example/`);
		await page.waitForURL(`${app.origin}/home`);
	});

	test('the account page lists sessions and ends them all', async () => {
		const { page } = screen;
		await page.goto(`${app.origin}/account`);
		await page.getByText('Chrome on Linux, this one').waitFor();
		await keepScreenshot(page, 'account');
		expect(await findAxeFaults(page)).toEqual([]);
		expect(await countSessions(people.mira)).toBe(2);
		await page.getByRole('button', { name: 'Sign out everywhere' }).click();
		await page.waitForURL(/\/signin/);
		expect(await countSessions(people.mira)).toBe(0);
	});

	test('a session that has expired opens nothing', async () => {
		await enterAs('Mira Solberg');
		await owner.db
			.update(session)
			.set({ expires: new Date(Date.now() - 1_000) })
			.where(eq(session.userId, people.mira));
		await screen.page.goto(`${app.origin}/lab/${labId}`);
		expect(screen.page.url()).toContain('/signin?to=');
	});

	test('somebody who is removed loses access at once', async () => {
		const noor = await browser.openScreen();
		await noor.page.goto(`${app.origin}/demo`);
		await noor.page.getByRole('button', { name: 'Enter as Noor Haddad' }).click();
		await noor.page.getByText('Good to see you, Noor').waitFor();
		await enterAs('Mira Solberg');
		await screen.page.goto(`${app.origin}/lab/${labId}/members`);
		await screen.page.getByRole('button', { name: 'Remove Noor Haddad' }).click();
		await screen.page
			.getByRole('dialog')
			.getByRole('button', { name: 'Remove Noor Haddad' })
			.click();
		await screen.page.getByText('They have left').waitFor();
		await noor.page.goto(`${app.origin}/lab/${labId}`);
		expect(noor.page.url()).toContain('/signin?to=');
		await noor.close();
	});

	test('the demo clock moves forward only', async () => {
		const { page } = screen;
		await page.goto(`${app.origin}/demo`);
		await keepScreenshot(page, 'rehearsal-people');
		expect(await findAxeFaults(page)).toEqual([]);
		const read = async () => (await page.locator('#clock strong').textContent()) ?? '';
		await page.getByRole('button', { name: 'Move to tomorrow 08:00' }).click();
		await page
			.getByText(/08:00 Oslo/)
			.first()
			.waitFor();
		const morning = await read();
		await page.getByRole('button', { name: 'Move by 1 hour' }).click();
		await page
			.getByText(/09:00 Oslo/)
			.first()
			.waitFor();
		expect(await read()).toBe(morning.replace('08:00', '09:00'));
		await page.getByLabel('Or to a time of the lab’s clock').fill('2020-01-01T10:00');
		await page.getByRole('button', { name: 'Move the clock there' }).click();
		await page.getByText('The demo clock only goes forward').waitFor();
	});

	test('no token stands in a log, and no page complained', () => {
		const log = app.readLog('web');
		expect(log).toContain('/signin/confirm');
		expect(log).not.toMatch(/token=|fjordview\.example/);
		expect(screen.complaints).toEqual([]);
	});

	async function enterAs(name: string) {
		await screen.page.goto(`${app.origin}/demo`);
		await screen.page.getByRole('button', { name: `Enter as ${name}` }).click();
		await screen.page.getByText('Good to see you').waitFor();
	}
});

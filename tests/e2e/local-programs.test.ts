import { createTransport } from 'nodemailer';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startApp, type AppServer } from '../support/app-server';
import { findAxeFaults } from '../support/axe';
import { openBrowser, type Screen, type TestBrowser } from '../support/browser';
import { linkIn } from '../support/mailbox';
import { keepScreenshot } from '../support/screenshot';

let app: AppServer;
let browser: TestBrowser;
const screens: Screen[] = [];

beforeAll(async () => {
	[app, browser] = await Promise.all([startApp('rehearsal'), openBrowser()]);
});
afterAll(async () => {
	await browser.close();
	await app.stop();
});

async function openScreen(options: Parameters<TestBrowser['openScreen']>[0]): Promise<Screen> {
	const screen = await browser.openScreen(options);
	screens.push(screen);
	return screen;
}

const calendar = [
	'BEGIN:VCALENDAR',
	'VERSION:2.0',
	'PRODID:-//Ovalry//EN',
	'METHOD:REQUEST',
	'BEGIN:VEVENT',
	'UID:visit-7@ovalry.example',
	'SEQUENCE:1',
	'DTSTAMP:20270301T090000Z',
	'DTSTART:20270302T130000Z',
	'DTEND:20270302T140000Z',
	'SUMMARY:Practising a sliding movement',
	'END:VEVENT',
	'END:VCALENDAR'
].join('\r\n');

async function sendMail(subject: string): Promise<void> {
	const port = Number(app.environment.OVALRY_MAILBOX_SMTP_PORT);
	const post = createTransport({ host: '127.0.0.1', port, ignoreTLS: true });
	await post.sendMail({
		from: 'lab@tidewater.example',
		to: 'seven@people.example',
		subject,
		text: `Answer here: ${app.origin}/answer/abc`,
		html: `<p>Answer <a href="${app.origin}/answer/abc">here</a></p>`,
		icalEvent: { method: 'REQUEST', content: calendar }
	});
}

describe('the local mailbox', () => {
	it('says what to do while it is empty', async () => {
		const { page } = await openScreen({});
		await page.goto(app.mailbox.url);
		expect(await page.textContent('main')).toContain('No mail so far');
		expect(await findAxeFaults(page)).toEqual([]);
		await keepScreenshot(page, 'mailbox-empty');
	});

	it.each([
		['desktop', 'light'],
		['phone', 'dark']
	] as const)('shows a mail with its calendar part (%s, %s)', async (screen, theme) => {
		await sendMail(`Your visit (${screen})`);
		const mail = await app.mailbox.waitFor('seven@people.example', ({ subject }) =>
			subject.includes(screen)
		);
		expect(linkIn(mail, /answer/)).toBe(`${app.origin}/answer/abc`);
		const { page } = await openScreen({ screen, theme });
		await page.goto(app.mailbox.url);
		await page.getByRole('link', { name: `Your visit (${screen})` }).click();
		expect(await page.textContent('main')).toContain('REQUEST');
		expect(await page.textContent('main')).toContain('2 Mar 2027, 13:00 UTC');
		const inner = page.frameLocator('iframe');
		expect(await inner.locator('p').textContent()).toBe('Answer here');
		expect(await findAxeFaults(page)).toEqual([]);
		await keepScreenshot(page, `mailbox-mail-${screen}-${theme}`);
	});

	it('leads from a link in the mail to Ovalry, without a referrer', async () => {
		const { page } = await openScreen({});
		await page.goto(app.mailbox.url);
		await page
			.getByRole('link', { name: /Your visit/ })
			.first()
			.click();
		const request = page.waitForRequest(`${app.origin}/answer/abc`);
		await page.getByRole('link', { name: `${app.origin}/answer/abc` }).click();
		expect((await request).headers().referer).toBeUndefined();
	});
});

describe('the sign-on stand-in', () => {
	it.each([
		['desktop', 'light'],
		['phone', 'dark']
	] as const)('says that it is one (%s, %s)', async (screen, theme) => {
		const query = new URLSearchParams({
			client_id: app.environment.OIDC_CLIENT_ID ?? '',
			redirect_uri: `${app.origin}/auth/callback/university`,
			response_type: 'code'
		});
		const { page } = await openScreen({ screen, theme });
		await page.goto(`${app.signOnUrl}/authorize?${query.toString()}`);
		expect(await page.textContent('header')).toContain('It asks for no password');
		expect(await findAxeFaults(page)).toEqual([]);
		await keepScreenshot(page, `sign-on-${screen}-${theme}`);
	});

	it('sends a typed address back to Ovalry with a code', async () => {
		const { page } = await openScreen({});
		const query = new URLSearchParams({
			client_id: app.environment.OIDC_CLIENT_ID ?? '',
			redirect_uri: `${app.origin}/auth/callback/university`,
			response_type: 'code',
			state: 'kept'
		});
		await page.goto(`${app.signOnUrl}/authorize?${query.toString()}`);
		await page.getByLabel('E-mail address').fill('ida@tidewater.example');
		const request = page.waitForRequest((one) =>
			one.url().startsWith(`${app.origin}/auth/callback`)
		);
		await page.getByRole('button', { name: 'Sign in with this address' }).click();
		const back = new URL((await request).url());
		expect(back.searchParams.get('state')).toBe('kept');
		expect(back.searchParams.get('code')).toMatch(/^[\w-]{20,}$/);
	});
});

it('no page of them complained on the console', () => {
	const own = screens
		.flatMap(({ complaints }) => complaints)
		.filter((line) => !line.startsWith(app.origin));
	expect(own).toEqual([]);
});

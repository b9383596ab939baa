import { readFileSync } from 'node:fs';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { startApp, type AppServer } from '../support/app-server';
import { findAxeFaults } from '../support/axe';
import { openBrowser, type Screen, type TestBrowser } from '../support/browser';
import { linkIn } from '../support/mailbox';
import { keepScreenshot } from '../support/screenshot';

/** A steward sets up an empty lab, and somebody they invite comes in. */
describe('setting up an empty lab', () => {
	let app: AppServer;
	let browser: TestBrowser;
	let steward: Screen;

	beforeAll(async () => {
		app = await startApp('rehearsal');
		browser = await openBrowser();
		steward = await browser.openScreen();
	});
	afterAll(async () => {
		await browser.close();
		await app.stop();
	});

	const lab = () => new URL(steward.page.url()).pathname.split('/').slice(0, 3).join('/');
	const open = (path: string) => steward.page.goto(`${app.origin}${path}`);
	const zone = () => steward.page.getByRole('combobox', { name: 'Time zone' });
	const box = (name: RegExp) => steward.page.getByRole('checkbox', { name });
	const press = (name: string | RegExp) => steward.page.getByRole('button', { name }).click();
	const field = (name: string | RegExp) => steward.page.getByRole('textbox', { name });
	const fill = (name: string | RegExp, text: string) => field(name).fill(text);
	const see = (text: string | RegExp) => steward.page.getByText(text).first().waitFor();

	test('the terminal’s link opens a form that names a mistyped time zone', async () => {
		await steward.page.goto(app.setupLink ?? '');
		expect(await findAxeFaults(steward.page)).toEqual([]);
		await fill('Your name', 'Sigrid Tangen');
		await fill('Your e-mail address', 'Sigrid@Fjordview.example');
		await fill('Its name', 'Fjordview Movement Lab');
		await zone().fill('Europe/Lisboa');
		await fill(/^Address/, 'Quay Street 4\n1100 Lisbon');
		await press('Set up the lab and sign me in');
		await see('Did you mean Europe/Lisbon?');
		await keepScreenshot(steward.page, 'setup-form');
		expect(await field('Its name').inputValue()).toBe('Fjordview Movement Lab');
	});

	test('the right one makes the lab, signs in and says what is missing', async () => {
		await zone().fill('Europe/Lisbon');
		await press('Set up the lab and sign me in');
		await steward.page.waitForURL(/\/lab\/[0-9a-f-]{36}$/);
		await see('4 things are missing before visits can be booked');
		await keepScreenshot(steward.page, 'lab-missing');
		expect(await findAxeFaults(steward.page)).toEqual([]);
	});

	test('the link says that it was used', async () => {
		const other = await browser.openScreen();
		await other.page.goto(app.setupLink ?? '');
		await other.page.getByText('This link was used already').waitFor();
		await other.close();
	});

	test('a room and a powered rig are added, the rig only with checked limits', async () => {
		await open(`${lab()}/rigs`);
		await fill('Room', 'Room 12');
		await fill(/^How to get there/, 'Side door, second floor.');
		await press('Add the room');
		await see('Room 12 is added.');
		await steward.page.getByRole('link', { name: 'Add a rig' }).click();
		await fill('Name', 'Gull');
		await box(/^Powered/).check();
		await press('Add the rig');
		await see('A powered rig needs at least one largest value');
		await see('Have the limits checked on the rig first');
		await keepScreenshot(steward.page, 'rig-form');
		expect(await findAxeFaults(steward.page)).toEqual([]);
		await fill(/^Largest values/, 'release_speed_m_s 1.8');
		await box(/^Qualified staff/).check();
		await press('Add the rig');
		await see('Gull is added');
	});

	test('its weekly hours are one line', async () => {
		expect(await field('Weekly hours').inputValue()).toBe('Mon-Fri 09:00-17:00');
		await fill('Weekly hours', 'Mon-Fri 9-12, 13-17\nSat');
		await press('Keep these hours');
		await see('Line 2, “Sat”, has no hours.');
		await fill('Weekly hours', 'Mon-Fri 9-12, 13-17');
		await press('Keep these hours');
		await see('These hours hold from now on.');
		await see('35');
	});

	test('its key pair is made in the browser and the private half saved once', async () => {
		const saving = steward.page.waitForEvent('download');
		await press('Make a key pair here');
		const file = await saving;
		expect(file.suggestedFilename()).toBe('gull-private-key.json');
		const kept = JSON.parse(readFileSync(await file.path(), 'utf8'));
		expect(kept.d).toMatch(/^[\w-]{43}$/);
		const typed = await field(/^Public key/).inputValue();
		expect(JSON.parse(typed)).not.toHaveProperty('d');
		await fill(/^Public key/, JSON.stringify(kept));
		await press('Keep this public key');
		await see('This holds the private half of the key.');
		await fill(/^Public key/, typed);
		await press('Keep this public key');
		await see('is in use');
		await keepScreenshot(steward.page, 'rig-page');
		expect(await findAxeFaults(steward.page)).toEqual([]);
	});

	test('staff and holidays are entered', async () => {
		await open(`${lab()}/staff`);
		await steward.page.getByLabel('Which member it is').selectOption({ label: 'Sigrid Tangen' });
		await press('Add to the staff');
		await see('Sigrid Tangen is added.');
		await keepScreenshot(steward.page, 'staff');
		await open(`${lab()}/holidays`);
		await fill(/^Days, one line each/, '2037-04-03 Good Friday\n2037-13-01 Nothing');
		await press('Close these days');
		await see('Line 2: the calendar has no 2037-13-01.');
		await fill(/^Days, one line each/, '2037-04-03 Good Friday\n2037-12-24 to 2037-12-26 Break');
		await press('Close these days');
		await see('4 days are closed.');
		await press('Open again on Thu 24 December 2037');
		await press('Close it again');
		await see('1 day is closed.');
		await keepScreenshot(steward.page, 'holidays');
		expect(await findAxeFaults(steward.page)).toEqual([]);
		await open(lab());
		await see('1 thing is missing before visits can be booked');
		await fill(/^Telephone/, '+351 21 000 00 00');
		await press('Keep');
		await see('Everything is entered that booking needs');
	});

	test('somebody who is invited comes in by the mailed link, which works once', async () => {
		await open(`${lab()}/members`);
		await fill('Their name', 'Milo Reyes');
		await fill('Their e-mail address', 'milo@fjordview.example');
		await press('Invite Milo Reyes');
		await see('the invitation is on its way to milo@fjordview.example');
		await keepScreenshot(steward.page, 'members');
		expect(await findAxeFaults(steward.page)).toEqual([]);
		const link = linkIn(await app.mailbox.waitFor('milo@fjordview.example'), /confirm/);
		const milo = await browser.openScreen();
		await milo.page.goto(link);
		await milo.page.goto(link);
		await milo.page.getByRole('button', { name: 'Sign in' }).click();
		await milo.page.getByText('Good to see you, Milo').waitFor();
		await keepScreenshot(milo.page, 'home-member');
		expect(await findAxeFaults(milo.page)).toEqual([]);
		await milo.page.goto(`${app.origin}${lab()}/rigs`);
		await milo.page.getByText('The lab’s steward changes rooms and rigs.').waitFor();
		expect(await milo.page.getByRole('button', { name: 'Add the room' }).count()).toBe(0);
		expect((await milo.page.goto(`${app.origin}${lab()}/members`))?.status()).toBe(404);
		await milo.close();
		const late = await browser.openScreen();
		await late.page.goto(link);
		await late.page.getByRole('button', { name: 'Sign in' }).click();
		await late.page.getByText('This link does not work any more').waitFor();
		await late.close();
	});

	test('no page complained', () => {
		expect(steward.complaints).toEqual([]);
	});
});

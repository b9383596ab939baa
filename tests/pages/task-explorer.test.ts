import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { startApp, type AppServer } from '../support/app-server';
import { findAxeFaults } from '../support/axe';
import { openBrowser, type Screen, type TestBrowser } from '../support/browser';
import { keepScreenshot } from '../support/screenshot';

/** The models as the lab's list names them, with the words that a probe at the origin begins with. */
const models: readonly (readonly [string, RegExp])[] = [
	['Sliding puck', /Perfect, to the digits shown/],
	['Pushed puck', /The puck stops/],
	['Puck on a chosen surface', /Perfect, to the digits shown/],
	['Throw at a target', /Passes the target’s plane/],
	['Throw with height of release', /Passes the target’s plane/],
	['Throw with direction to the side', /Passes .* the target/],
	['Tethered-ball throw', /Passes .* of the target after .* clear of the post/],
	['Ball bounced on a paddle', /The ball rises/],
	['Two-finger force', /Perfect, to the digits shown/],
	['Three-joint reach to a point', /The fingertip is .* from the target/],
	['Three-joint reach to a line', /The fingertip is/],
	['Cart with a pendulum', /The effort is/],
	['Weighted sum', /Perfect, to the digits shown/],
	['A formula of your own', /The result is/]
];

/** Somebody of a lab looks at every task model, changes one and keeps it. */
describe('exploring tasks', () => {
	let app: AppServer;
	let browser: TestBrowser;
	let screen: Screen;
	let tasks = '';

	beforeAll(async () => {
		[app, browser] = await Promise.all([startApp('demo'), openBrowser()]);
		screen = await browser.openScreen();
		await signIn(screen);
		await screen.page.goto(`${app.origin}/home`);
		const lab = screen.page.locator('a[href*="/lab/"]').first();
		tasks = `${app.origin}/lab/${((await lab.getAttribute('href')) ?? '').split('/')[2]}/tasks`;
	});
	afterAll(async () => {
		await browser.close();
		await app.stop();
	});

	async function signIn({ page }: Screen) {
		const person = app.people.find(({ role }) => role === 'investigator');
		if (!person) throw new Error('the demo has no investigator');
		await page.goto(`${app.origin}/demo`);
		await page
			.getByRole('button', { name: new RegExp(person.name) })
			.first()
			.click();
		await page.waitForURL((url) => url.pathname !== '/demo');
	}

	const probe = (of: Screen) =>
		of.page.getByRole('application', { name: 'Probe on the error map' });
	const target = (of: Screen) => of.page.getByRole('application', { name: /^Target at/ });
	const words = (of: Screen) => of.page.locator('#probe-words');
	const settle = (of: Screen) =>
		of.page
			.getByText(/This cloud hits|of the next trials/)
			.first()
			.waitFor();

	test.each(models)('%s: the probe moves by keys and its numbers are said', async (name, said) => {
		const { page } = screen;
		await page.goto(tasks);
		await page.getByRole('link', { name, exact: true }).click();
		await page.getByRole('heading', { level: 1, name }).waitFor();
		await settle(screen);
		expect(await words(screen).innerText()).toMatch(said);
		const field = page.locator('.field input').first();
		const before = await field.inputValue();
		await probe(screen).focus();
		await page.keyboard.press('ArrowRight');
		expect(await field.inputValue()).not.toBe(before);
		const near = Number(await field.inputValue());
		await page.keyboard.press('Shift+ArrowLeft');
		expect(Number(await field.inputValue())).toBeLessThan(near);
		expect(await words(screen).innerText()).toMatch(/ more: /);
	});

	test('the page has no fault that axe finds, in both themes and on a phone', async () => {
		const looks = [
			['tethered-ball', {}],
			['two-finger', { theme: 'dark' }],
			['throw-height', { screen: 'phone' }]
		] as const;
		for (const [model, options] of looks) {
			const other = await browser.openScreen(options);
			await signIn(other);
			await other.page.goto(`${tasks}/new?model=${model}`);
			await settle(other);
			expect(await findAxeFaults(other.page)).toEqual([]);
			const wider = await other.page.evaluate(
				() => document.documentElement.scrollWidth - window.innerWidth
			);
			expect(wider).toBeLessThanOrEqual(0);
			await keepScreenshot(other.page, `explorer-${model}`);
			expect(other.complaints).toEqual([]);
			await other.close();
		}
	});

	test('a typed number moves the probe, and one outside the range is put inside', async () => {
		const { page } = screen;
		await page.goto(`${tasks}/new?model=tethered-ball`);
		await settle(screen);
		const angle = page.locator('.field input').nth(0);
		const speed = page.locator('.field input').nth(1);
		await angle.fill('-28');
		await angle.press('Enter');
		await speed.fill('3');
		await speed.press('Enter');
		await words(screen)
			.getByText(
				'Passes 5.6 cm to the right of the target after 0.57 s, clear of the post by 32 cm.'
			)
			.waitFor();
		await speed.fill('99');
		await speed.press('Enter');
		expect(await speed.inputValue()).toBe('7.00');
	});

	test('the target is moved by keys and by hand, and the form and the notes follow', async () => {
		const { page } = screen;
		await page.goto(`${tasks}/new?model=tethered-ball`);
		await settle(screen);
		await probe(screen).focus();
		await page.keyboard.press('t');
		await page.keyboard.press('Shift+ArrowUp');
		expect(await page.getByLabel('Target, y').inputValue()).toBe('1.2');
		await page.getByText('1 thing changed here').waitFor();
		const box = await target(screen).boundingBox();
		if (!box) throw new Error('the target cannot be seen');
		await page.mouse.move(box.x + box.width / 2, box.y + box.height / 2);
		await page.mouse.down();
		await page.mouse.move(box.x + box.width / 2 - 30, box.y + box.height / 2 + 12, { steps: 12 });
		await page.mouse.up();
		expect(Number(await page.getByLabel('Target, x').inputValue())).toBeLessThan(0.3);
		await page.getByText(/things changed here/).waitFor();
	});

	test('a penalized region has its numbers beside the map', async () => {
		const { page } = screen;
		await page.goto(`${tasks}/new?model=puck`);
		await settle(screen);
		await page.getByRole('checkbox', { name: 'Penalized region' }).check();
		await page.getByText('of the normal cloud').waitFor();
		await page.getByLabel('Half length along').fill('3');
		const inside = page.locator('dt:text("trials inside") + dd');
		await expect
			.poll(async () => Number((await inside.innerText()).split(' ')[0]))
			.toBeGreaterThan(30);
	});

	test('a formula says its faults at the character, and mixed units', async () => {
		const { page } = screen;
		await page.goto(`${tasks}/new?model=formula`);
		await settle(screen);
		const formula = page.getByLabel(/^Formula of the signed error/);
		await formula.fill('extent * (direction');
		await page.getByText('Character 20:').first().waitFor();
		await formula.fill('extent + direction * 2');
		await page.getByText('do not measure the same kind of thing').first().waitFor();
	});

	test('the table and the files behind a picture are there', async () => {
		const { page } = screen;
		await page.goto(`${tasks}/new?model=two-finger`);
		await settle(screen);
		const [csv] = await Promise.all([
			page.waitForEvent('download'),
			page.getByRole('button', { name: 'Save as CSV' }).first().click()
		]);
		expect(csv.suggestedFilename()).toBe('task-map.csv');
		const [svg] = await Promise.all([
			page.waitForEvent('download'),
			page.getByRole('button', { name: 'Save as SVG' }).first().click()
		]);
		const stream = await svg.createReadStream();
		const chunks: Buffer[] = [];
		for await (const chunk of stream) chunks.push(Buffer.from(chunk));
		const text = Buffer.concat(chunks).toString();
		expect(text).toContain('data:image/png;base64,');
		expect(text).toContain('zero error');
	});

	test('a task is kept for the lab, changed, and kept as its next version', async () => {
		const { page } = screen;
		await page.goto(`${tasks}/new?model=puck`);
		await settle(screen);
		await page.getByLabel('Name in the lab').fill('Puck of the pilot');
		await page.getByRole('button', { name: 'Keep it as a task of the lab' }).click();
		await page.getByText('Kept as version 1').waitFor();
		await page.getByLabel('Tolerance ±').fill('0.1');
		await page.getByText('Tolerance: 0.12 m → 0.1 m').first().waitFor();
		await page.getByLabel(/^What it is for/).fill('narrower after the pilot');
		await page.getByRole('button', { name: 'Keep version 2' }).click();
		await page.getByText('Kept as version 2').waitFor();
		await page.getByText('Tolerance: 0.12 m → 0.1 m').first().waitFor();
		await page.goto(tasks);
		await page.getByText('narrower after the pilot').waitFor();
		expect(await findAxeFaults(page)).toEqual([]);
	});

	test('the study’s own task stands between Today and Protocol', async () => {
		const { page } = screen;
		await page.goto(`${app.origin}/home`);
		await page.locator('a[href*="/studies/"]').first().click();
		await page.waitForURL(/studies/);
		const names = await page.getByRole('navigation').getByRole('link').allInnerTexts();
		const at = names.indexOf('Task');
		expect(names.slice(at - 1, at + 2)).toEqual(['Today', 'Task', 'Protocol']);
		await page.getByRole('navigation').getByRole('link', { name: 'Task', exact: true }).click();
		await settle(screen);
		await page.getByRole('heading', { level: 1, name: 'Sliding puck' }).waitFor();
		expect(await findAxeFaults(page)).toEqual([]);
		expect(screen.complaints).toEqual([]);
	});
});

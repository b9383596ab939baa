import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { findAxeFaults } from '../support/axe';
import { startApp, type AppServer } from '../support/app-server';
import { openBrowser, type TestBrowser } from '../support/browser';
import { readLadder } from './pages/day-ladder';
import { sitDown, type Desk } from './pages/desk';
import { setUpLab } from './pages/lab-pages';

/** A protocol of 3 arms, 6 visits and 4 blocks each, from a blank one, without a pointer. */
describe('designing by keyboard', () => {
	let app: AppServer;
	let browser: TestBrowser;
	let desk: Desk;
	const ladder = () => readLadder(desk.page);

	beforeAll(async () => {
		[app, browser] = await Promise.all([startApp('rehearsal'), openBrowser()]);
		desk = await sitDown(browser, app, { hands: 'keyboard' });
		await setUpLab(desk, app.setupLink ?? '', {
			steward: { name: 'Sigrid Tangen', email: 'sigrid@fjordview.example' },
			name: 'Fjordview Movement Lab',
			zone: 'Europe/Lisbon',
			address: 'Quay Street 4, 1100 Lisbon',
			phone: '+351 21 000 00 00'
		});
		await desk.open('/home');
	});
	afterAll(async () => {
		await browser?.close();
		await app?.stop();
	});

	test('a blank protocol opens', async () => {
		await desk.follow('Create a study');
		await desk.fill('Working title', 'Regions by keyboard');
		await desk.fill('Public title', 'Practising a sliding movement');
		await desk.fill('Letters of the codes', 'KB');
		await desk.fill('Phone for participants', '+351 21 000 00 01');
		await desk.tick('radio', /^Blank/);
		await desk.press('Create the study');
		await desk.page.waitForURL(/\/protocol\/draft$/);
		await desk.see('All changes saved');
	});

	test('becomes 3 arms, 6 visits and 4 blocks in each', async () => {
		await desk.hands.goTo(ladder().piece(0, 0, 0));
		await ladder().press('3 n', 'Shift+N', '3 n', '4 Shift+D');
		await ladder().expectSize(1, 6, 4);
		await ladder().press('2 Shift+A');
		await ladder().expectSize(3, 6, 4);
		expect(await ladder().place()).toBe('2:5:0');
	});

	test('gives one arm blocks of its own, typed, moved, copied and pasted', async () => {
		await ladder().press('4', '0', 'Alt+ArrowDown');
		await desk.see('own blocks');
		expect(await ladder().place()).toBe('2:5:1');
		expect(await ladder().piece(2, 5, 1).textContent()).toContain('40');
		await ladder().press('Shift+ArrowDown', 'ControlOrMeta+c', 'ArrowLeft', 'ControlOrMeta+v');
		await expect.poll(() => ladder().pieces.count()).toBe(74);
		await ladder().press('Delete');
		await ladder().press('=');
		await ladder().expectSize(3, 6, 4);
	});

	test('edits a block in its form and comes back to the piece', async () => {
		const place = await ladder().place();
		await ladder().press('e');
		await desk.page.locator('[name="piece.purpose"]:focus').waitFor();
		await desk.choose('What the block is for', 'target shift');
		await desk.fill('Shift at the last trial', '0.3');
		await ladder().press('Escape');
		await expect.poll(() => ladder().place()).toBe(place);
		expect(await desk.page.locator(`[data-spot="${place}"]`).textContent()).toContain('shift');
		await desk.expectNoAxeFaults();
		await desk.keep('design-ladder');
	});

	test('goes back to the blank protocol and forth again', async () => {
		const button = (name: RegExp) => desk.page.getByRole('button', { name });
		for (let step = 0; step < 60 && (await button(/^Undo:/).count()) > 0; step += 1) {
			await ladder().press('ControlOrMeta+z');
		}
		await ladder().expectSize(1, 1, 1);
		for (let step = 0; step < 60 && (await button(/^Redo:/).count()) > 0; step += 1) {
			await ladder().press('ControlOrMeta+Shift+z');
		}
		await ladder().expectSize(3, 6, 4);
		await desk.see('All changes saved');
	});

	test('is still there after the page is loaded again', async () => {
		await desk.page.reload();
		await ladder().expectSize(3, 6, 4);
		await desk.see('All changes saved');
	});

	test('is shown as a table by the palette, and mended there', async () => {
		await desk.hands.goTo(ladder().piece(0, 0, 0));
		await ladder().press('ControlOrMeta+k');
		await desk.page.getByRole('combobox', { name: 'Page or act' }).waitFor();
		expect(await findAxeFaults(desk.page)).toEqual([]);
		await desk.keep('design-palette');
		await desk.page.keyboard.type('show table');
		await ladder().press('Enter');
		const grid = desk.page.getByRole('grid', { name: 'Every block of the protocol' });
		await grid.waitFor();
		await desk.hands.goTo(grid.locator('[data-place="0:0"]'));
		await ladder().press('4 ArrowRight');
		await desk.page.keyboard.type('4x');
		await ladder().press('Enter');
		await desk.see(/“4x” is not kept/);
		await desk.page.keyboard.type('44');
		await ladder().press('Enter');
		await expect.poll(() => grid.locator('[data-place="0:4"]').textContent()).toContain('44');
		await desk.expectNoAxeFaults();
		await desk.keep('design-table');
		await desk.see('All changes saved');
		desk.expectNoComplaints();
	});

	test('loses nothing when its tab is killed before anything was saved', async () => {
		const { context } = desk.screen;
		const address = desk.page.url();
		await context.setOffline(true);
		await desk.page.keyboard.type('37');
		await ladder().press('Enter');
		await desk.see(/^Not saved/);
		await desk.page.close();
		await context.setOffline(false);
		const page = await context.newPage();
		await page.goto(address);
		await page.getByText('What you typed before this page was closed is back').waitFor();
		await page.getByText('All changes saved').waitFor();
		expect(await readLadder(page).piece(0, 0, 1).textContent()).toContain('37');
	});
});

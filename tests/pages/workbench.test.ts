import { readFileSync } from 'node:fs';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { runCommand } from '$scheduler/cli/run-command';
import { startApp, type AppServer } from '../support/app-server';
import { findAxeFaults } from '../support/axe';
import { openBrowser, type Screen, type TestBrowser } from '../support/browser';
import { keepScreenshot } from '../support/screenshot';

/** The investigator tries the demo's protocol before anybody is asked to live with it. */
describe('trying a protocol', () => {
	let app: AppServer;
	let browser: TestBrowser;
	let ivy: Screen;

	beforeAll(async () => {
		[app, browser] = await Promise.all([startApp('demo'), openBrowser()]);
		ivy = await browser.openScreen();
		const investigator = app.people.find(({ role }) => role === 'investigator');
		await ivy.page.goto(`${app.origin}/demo`);
		await ivy.page.getByRole('button', { name: `Enter as ${investigator?.name ?? ''}` }).click();
		await ivy.page.getByText(/Good to see you/).waitFor();
	});
	afterAll(async () => {
		await browser?.close();
		await app?.stop();
	});

	const press = (name: string | RegExp) => ivy.page.getByRole('button', { name }).click();
	const fill = (label: string, text: string) =>
		ivy.page.getByLabel(label, { exact: true }).fill(text);

	test('the protocol leads to its workbench, which shows the rule’s hash and the plan', async () => {
		await ivy.page
			.getByRole('link', { name: /Puck release/ })
			.first()
			.click();
		await ivy.page
			.getByRole('navigation')
			.getByRole('link', { name: 'Protocol', exact: true })
			.click();
		await ivy.page.getByRole('link', { name: 'Try the rule and the plan' }).click();
		await ivy.page.getByRole('heading', { name: 'The plan in one view' }).waitFor();
		await ivy.page.getByText(/^\d+ in 2 arms$/).waitFor();
		expect(await findAxeFaults(ivy.page)).toEqual([]);
	});

	test('a run is stopped and goes on where it was, to curves with their intervals', async () => {
		await fill('People a value', '3');
		await press('Try 3 people on 4 values');
		await ivy.page.getByText(/^[1-9]\d* of 12, \d side by side$/).waitFor();
		await press('Stop');
		const stopped = await ivy.page.getByText(/^Stopped at \d+ of 12/).textContent();
		const before = Number(/at (\d+)/.exec(stopped ?? '')?.[1]);
		expect(before).toBeGreaterThan(0);
		await press('Try 3 people on 4 values');
		await ivy.page.getByText(/^12 of 12 runs/).waitFor();
		await ivy.page.getByRole('img', { name: 'False triggers without a true change' }).waitFor();
		// The table behind the picture is folded away until it is asked for.
		const table = ivy.page.locator('[aria-label^="Table of False triggers"]');
		const numbers = (await table.textContent()) ?? '';
		expect(numbers.match(/\d+ of \d+/g)?.length).toBeGreaterThanOrEqual(4);
		await keepScreenshot(ivy.page, 'workbench-curves');
	});

	test('one of the counted people is walked through by the arrow keys', async () => {
		await press('Show person 1');
		await ivy.page.getByText('Day 1, block 1: baseline').waitFor();
		await ivy.page.getByRole('group', { name: /^Blocks of the run/ }).focus();
		await ivy.page.keyboard.press('ArrowRight');
		await ivy.page.getByText(/^Day 1, block 2: /).waitFor();
		expect(await findAxeFaults(ivy.page)).toEqual([]);
	});

	test('invented people walk the protocol, and dead ends are listed with their remedy', async () => {
		await fill('People', '8');
		await fill('Miss a visit', '60');
		await press('Let 8 people walk it');
		await ivy.page.getByText(/ of 8 finished/).waitFor();
		await keepScreenshot(ivy.page, 'dry-run');
		// The demo makes missed days up within 48 h: over a weekend that cannot be.
		const ends = ivy.page.getByRole('table', { name: 'Dead ends of the dry run' });
		const [, first] = await ends.getByRole('row').all();
		expect(await first?.innerText()).toMatch(/Allow more hours|widen the gap|longer gap|weekdays/);
	});

	test('the exported protocol gets its verdicts from the command line', async () => {
		const address = ivy.page.url().replace('/protocol/workbench', '/protocol/export');
		await ivy.page.goto(address);
		const link = ivy.page.getByRole('link', { name: /^Download version \d+ as JSON/ }).first();
		const waiting = ivy.page.waitForEvent('download');
		await link.click();
		const text = readFileSync(await (await waiting).path(), 'utf8');
		const { exitCode, stdout } = runCommand(['check-design'], () => text);
		expect(exitCode).toBe(0);
		expect(JSON.parse(stdout)).toMatchObject({ open: 0 });
	});
});

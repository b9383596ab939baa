import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Page } from 'playwright-core';
import { startApp, type AppServer } from '../support/app-server';
import { findAxeFaults } from '../support/axe';
import { openBrowser, type TestBrowser } from '../support/browser';
import { lookClosely } from '../support/look-closely';

/**
 * Every page of the demo that a role is offered, found by its links alone: it answers, complains of
 * nothing, and reads well on a wide screen and a phone, in the light and in the dark.
 */

const roles = [
	'steward',
	'investigator',
	'statistician',
	'unblinded-statistician',
	'coordinator',
	'operator',
	'approver',
	'monitor'
] as const;

let app: AppServer;
let browser: TestBrowser;
/** Pages that some role before has looked at closely already, by their pattern. */
const looked = new Set<string>();

beforeAll(async () => {
	[app, browser] = await Promise.all([startApp('demo'), openBrowser()]);
});
afterAll(async () => {
	await browser?.close();
	await app?.stop();
});

/** `/studies/3f…/people/9a…` and `/studies/77…/people/01…` are one page. */
function patternOf(path: string): string {
	return path.replace(/[0-9a-f]{8}-[0-9a-f-]{27}/g, 'one').replace(/\/\d+(?=\/|$)/g, '/n');
}

/** The application's own pages that this one leads to; files and other sites are none. */
async function readLinks(page: Page): Promise<string[]> {
	const hrefs = await page.evaluate(() =>
		[...document.querySelectorAll<HTMLAnchorElement>('a[href]:not([download])')]
			.filter((link) => link.checkVisibility())
			.map((link) => link.getAttribute('href') ?? '')
	);
	return hrefs
		.map((href) => new URL(href, page.url()))
		.filter(({ origin }) => origin === app.origin)
		.map(({ pathname }) => pathname);
}

async function visitEveryPage(page: Page, start: string, look: (pattern: string) => Promise<void>) {
	const waiting = [start];
	const seen = new Map<string, string>();
	for (let path = waiting.shift(); path !== undefined; path = waiting.shift()) {
		const pattern = patternOf(path);
		if (seen.has(pattern)) continue;
		seen.set(pattern, path);
		const reply = await page.goto(app.origin + path);
		expect(reply?.status(), `${path} answers`).toBe(200);
		await look(pattern);
		waiting.push(...(await readLinks(page)));
	}
	return [...seen.keys()];
}

describe('every page that is offered', () => {
	it.each(roles)('to the %s', async (role) => {
		const person = app.people.find((one) => one.role === role);
		if (!person) throw new Error(`the demo has no ${role}`);
		const { page, complaints, close } = await browser.openScreen();
		await page.goto(`${app.origin}/demo`);
		await page.getByRole('button', { name: `Enter as ${person.name}` }).click();
		await page.waitForURL((url) => url.pathname !== '/demo');
		const faults: string[] = [];
		const pages = await visitEveryPage(page, new URL(page.url()).pathname, async (pattern) => {
			if (looked.has(pattern)) return;
			looked.add(pattern);
			await page.waitForLoadState('networkidle');
			faults.push(...(await lookClosely(page, `page-${pattern.replaceAll('/', '-')}`)));
		});
		expect(faults).toEqual([]);
		expect(complaints).toEqual([]);
		expect(pages.length).toBeGreaterThan(3);
		await close();
	});

	it('to somebody who is not signed in', async () => {
		const { page, complaints, close } = await browser.openScreen();
		const faults: string[] = [];
		for (const path of ['/', '/signin', '/demo', '/nowhere']) {
			await page.goto(app.origin + path);
			faults.push(...(await findAxeFaults(page)));
			faults.push(...(await lookClosely(page, `open${path.replaceAll('/', '-')}`)));
		}
		expect(faults).toEqual([]);
		expect(complaints).toEqual([]);
		await close();
	});
});

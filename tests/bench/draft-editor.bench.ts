import { afterAll, beforeAll, bench, describe } from 'vitest';
import type { Page } from 'playwright-core';
import { createPatternDraft } from '../../src/lib/protocol/patterns';
import { startApp, type AppServer } from '../support/app-server';
import { openBrowser, type TestBrowser } from '../support/browser';
import { enlargeDraft } from './large-draft';

/**
 * What a key and a dragged frame cost in the editor of a large protocol, in Chromium on the built
 * application, until the frame is painted: a frame of its own is 17 ms. The goal is 50 ms a key.
 */

let app: AppServer;
let browser: TestBrowser;
let page: Page;

beforeAll(async () => {
	[app, browser] = await Promise.all([startApp('demo'), openBrowser()]);
	({ page } = await browser.openScreen());
	await openLargeDraft();
}, 600_000);
afterAll(async () => {
	await browser?.close();
	await app?.stop();
});

async function openLargeDraft(): Promise<void> {
	const person = app.people.find(({ role }) => role === 'investigator');
	await page.goto(`${app.origin}/demo`);
	await page.getByRole('button', { name: `Enter as ${person?.name}` }).click();
	await page.waitForURL((url) => url.pathname !== '/demo');
	const link = await page.locator('a[href*="/studies/"]').first().getAttribute('href');
	const [study] = /\/studies\/[0-9a-f-]+/.exec(link ?? '') ?? [];
	await page.goto(`${app.origin}${study}/protocol`);
	await page
		.getByRole('button', { name: /^Write version/ })
		.first()
		.click();
	await page.waitForURL(/\/draft$/);
	const number = Number(/\d+/.exec(await page.title())?.[0]);
	const draft = enlargeDraft(createPatternDraft('two-arms'));
	const body = JSON.stringify({ number, revision: 0, draft });
	await page.evaluate(async (text) => {
		const headers = { 'content-type': 'application/json' };
		const reply = await fetch(location.pathname, { method: 'PUT', headers, body: text });
		if (!reply.ok) throw new Error(`not saved: ${reply.status}`);
	}, body);
	await page.reload({ waitUntil: 'networkidle' });
	await page.locator('[data-spot="3:10:5"]').focus();
}

/** Runs in the page: one event, then the frame that shows it. */
const pressKey = (key: string) =>
	new Promise<void>((done) => {
		const piece = document.querySelector('[data-spot="3:10:5"]');
		piece?.dispatchEvent(new KeyboardEvent('keydown', { key, bubbles: true, cancelable: true }));
		requestAnimationFrame(() => setTimeout(done));
	});

const dragTo = (at: number) =>
	new Promise<void>((done) => {
		const piece = document.querySelector('[data-spot="0:2:0"]');
		const { left = 0, top = 0 } = piece?.getBoundingClientRect() ?? {};
		const event = (type: string, by: number) =>
			new PointerEvent(type, { bubbles: true, clientX: left + 9 + by, clientY: top + 9 + by });
		if (at === 0) piece?.dispatchEvent(event('pointerdown', 0));
		else window.dispatchEvent(event('pointermove', 10 + (at % 200)));
		requestAnimationFrame(() => setTimeout(done));
	});

describe('6 arms x 20 visits x 12 blocks', () => {
	let count = 0;
	const once = { iterations: 40, time: 0, warmupIterations: 5, warmupTime: 0 };

	bench('a digit on a piece', () => page.evaluate(pressKey, String((count++ % 9) + 1)), once);
	bench('an arrow', () => page.evaluate(pressKey, count++ % 2 ? 'ArrowDown' : 'ArrowUp'), once);
	bench('a dragged frame', () => page.evaluate(dragTo, count++), {
		...once,
		setup: () => page.evaluate(dragTo, 0)
	});
});

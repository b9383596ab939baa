import { mkdirSync } from 'node:fs';
import { join, resolve } from 'node:path';
import type { Page } from 'playwright-core';

const folder = resolve(import.meta.dirname, '../../test-results/screens');

/** Pictures that follow their width are drawn anew a frame after it changed. */
export async function waitForPaint(page: Page): Promise<void> {
	await page.evaluate(
		() => new Promise((done) => requestAnimationFrame(() => requestAnimationFrame(done)))
	);
}

/**
 * Keeps a picture of the page as a test artefact, in test-results/screens.
 *
 * @param name such as `journey-03-power`; becomes the file's name
 * @returns the file
 */
export async function keepScreenshot(page: Page, name: string): Promise<string> {
	mkdirSync(folder, { recursive: true });
	const file = join(folder, `${name.replace(/[^\w-]+/g, '-')}.png`);
	await waitForPaint(page);
	await page.screenshot({ path: file, fullPage: true });
	return file;
}

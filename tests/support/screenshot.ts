import { mkdirSync } from 'node:fs';
import { join, resolve } from 'node:path';
import type { Page } from 'playwright-core';

const folder = resolve(import.meta.dirname, '../../test-results/screens');

/**
 * Keeps a picture of the page as a test artefact, in test-results/screens.
 *
 * @param name such as `journey-03-power`; becomes the file's name
 * @returns the file
 */
export async function keepScreenshot(page: Page, name: string): Promise<string> {
	mkdirSync(folder, { recursive: true });
	const file = join(folder, `${name.replace(/[^\w-]+/g, '-')}.png`);
	await page.screenshot({ path: file, fullPage: true });
	return file;
}

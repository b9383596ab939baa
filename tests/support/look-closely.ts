import type { Page } from 'playwright-core';
import { findAxeFaults } from './axe';
import { keepScreenshot, waitForPaint } from './screenshot';

/** Wide and narrow, light and dark, of one page as it stands. */
export async function lookClosely(page: Page, name: string): Promise<string[]> {
	const faults: string[] = [];
	await page.setViewportSize({ width: 390, height: 844 });
	faults.push(...(await findAxeFaults(page)));
	await keepScreenshot(page, `${name}-phone`);
	await page.setViewportSize({ width: 360, height: 780 });
	await waitForPaint(page);
	const overflow = await page.evaluate(
		() => document.documentElement.scrollWidth - document.documentElement.clientWidth
	);
	if (overflow > 0) faults.push(`${page.url()}: ${overflow} px too wide at 360 px`);
	await page.setViewportSize({ width: 1440, height: 900 });
	await keepScreenshot(page, name);
	await page.emulateMedia({ colorScheme: 'dark' });
	await waitForPaint(page);
	faults.push(...(await findAxeFaults(page)));
	await keepScreenshot(page, `${name}-dark`);
	await page.emulateMedia({ colorScheme: 'light' });
	return faults;
}

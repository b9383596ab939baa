import { expect } from 'vitest';
import type { Page } from 'playwright-core';

/** The day ladder worked by keys alone, as somebody does who never takes a pointer. */
export function readLadder(page: Page) {
	const pieces = page.locator('[data-cell] [data-spot]');
	return {
		pieces,
		piece: (arm: number, visit: number, block: number) =>
			page.locator(`[data-spot="${arm}:${visit}:${block}"]`),
		/** Presses keys one after another; '3 N' is N three times. */
		async press(...keys: string[]): Promise<void> {
			for (const entry of keys) {
				const [, times = '1', key = entry] = /^(\d+) (.+)$/.exec(entry) ?? [];
				for (let count = 0; count < Number(times); count += 1) await page.keyboard.press(key);
			}
		},
		say: () => page.locator('p[role=status]').allTextContents(),
		/** Where one stands, as 'arm:visit:block'. */
		place: () =>
			page.evaluate(() =>
				document.activeElement instanceof HTMLElement
					? (document.activeElement.dataset['spot'] ?? '')
					: ''
			),
		/** Arms times visits times blocks, counted on the page. */
		async expectSize(arms: number, visits: number, blocks: number): Promise<void> {
			await expect.poll(() => pieces.count()).toBe(arms * visits * blocks);
			expect(await page.locator('[data-cell]').count()).toBe(arms * visits);
		}
	};
}

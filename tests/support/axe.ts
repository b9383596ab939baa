import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import type { AxeResults } from 'axe-core';
import type { Page } from 'playwright-core';

const source = readFileSync(createRequire(import.meta.url).resolve('axe-core/axe.min.js'), 'utf8');

/**
 * What axe-core finds serious or critical on the page as it stands, one line for each element; an
 * empty list means nothing.
 *
 * @example
 * expect(await findAxeFaults(page)).toEqual([]);
 */
export async function findAxeFaults(page: Page): Promise<string[]> {
	// Evaluated from outside the page, so that its content security policy stays as it is.
	await page.evaluate(source);
	const { violations } = await page.evaluate<AxeResults>(
		`axe.run(document, { resultTypes: ['violations'] })`
	);
	return violations
		.filter(({ impact }) => impact === 'serious' || impact === 'critical')
		.flatMap(({ id, help, nodes }) =>
			nodes.map(({ target, failureSummary }) =>
				[`${page.url()}: ${id} (${help}) at ${target.join(' ')}`, failureSummary].join('\n')
			)
		);
}

import { createHash } from 'node:crypto';
import postgres from 'postgres';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { openDatabase, type DatabaseHandle } from '$lib/server/db/client';
import type { StudyRole } from '$lib/server/db/schema';
import { canonicalJson, sha256Hex } from '$lib/server/record/canonical-json';
import { startApp, type AppServer } from '../support/app-server';
import { findAxeFaults } from '../support/axe';
import { openBrowser, type Screen, type TestBrowser } from '../support/browser';
import { createPatternContent } from '../support/full-protocol';
import { plantLab, plantMember, plantStudy, type PlantedStudy } from '../support/planted-study';
import { keepScreenshot } from '../support/screenshot';
import { signInAll } from '../support/twin/ask-everything';
import { createDesk, type Desk } from './pages/desk';

/** A frozen protocol is amended, compared, commented on, printed and exported, each by its page. */

let app: AppServer;
let owner: DatabaseHandle;
let sql: postgres.Sql;
let browser: TestBrowser;
let home: PlantedStudy;
let investigator: Desk;
let coordinator: Desk;
let base: string;

beforeAll(async () => {
	app = await startApp('rehearsal');
	owner = openDatabase(app.database.ownerUrl, { max: 2 });
	sql = postgres(app.database.ownerUrl, { max: 1, onnotice: () => {} });
	browser = await openBrowser();
	home = await plantStudy(owner.db, await plantLab(owner.db), { content: createPatternContent() });
	base = `${app.origin}/studies/${home.studyId}/protocol`;
	investigator = await sitDownAs('investigator');
	coordinator = await sitDownAs('coordinator');
});
afterAll(async () => {
	await browser.close();
	await sql.end();
	await owner.end();
	await app.stop();
});

async function sitDownAs(role: StudyRole): Promise<Desk> {
	const { personId } = await plantMember(owner.db, home, role);
	const cookies = await signInAll(sql, [personId]);
	const [name = '', value = ''] = (cookies.get(personId) ?? '').split('=');
	const screen: Screen = await browser.openScreen();
	await screen.context.addCookies([{ name, value, url: app.origin }]);
	return createDesk(screen, app);
}

async function lookAt(desk: Desk, name: string) {
	expect(await findAxeFaults(desk.page)).toEqual([]);
	await keepScreenshot(desk.page, `protocol-${name}`);
}

describe('a protocol that runs', () => {
	test('is amended with a reason, a date and who consents anew', async () => {
		const { page } = investigator;
		await page.goto(base);
		await lookAt(investigator, 'version');
		await investigator.press('Write version 2');
		await page.waitForURL(/\/draft$/);
		await investigator.fill('Version of the consent text', '2');
		await investigator.see('All changes saved');
		await investigator.follow('Say why, and freeze version 2');
		await page.waitForURL(/\/freeze$/);
		await investigator.see('The consent text becomes version 2.');
		await lookAt(investigator, 'freeze');
		await investigator.press('Freeze version 2');
		await investigator.see('Say in a sentence why this version is frozen');
		await investigator.fill(
			'Reason of the amendment',
			'The board asked for a clearer consent text.'
		);
		await investigator.tick('radio', /^They stop until they sign/);
		await investigator.press('Freeze version 2');
		await investigator.see('Version 2 is frozen and can no longer change.');
		await investigator.see('The board asked for a clearer consent text.');
		await investigator.follow('Who is affected');
		await investigator.see('They stop until they sign');
		await lookAt(investigator, 'amendment');
	});

	test('tells between any two versions what changed, and why', async () => {
		await coordinator.page.goto(`${base}/compare?from=1&to=2`);
		await coordinator.see('1 line differs of what you may read.');
		await coordinator.see('Limits and consent, Consent text');
		await coordinator.see('The board asked for a clearer consent text.');
		await lookAt(coordinator, 'compare');
	});

	test('is commented on at a line; the comment is answered and resolved', async () => {
		await coordinator.page.goto(`${base}?version=2&on=booking%2Fclock#comment`);
		await coordinator.fill('Comment', 'Nobody comes before nine.');
		await coordinator.press('Leave this comment');
		await coordinator.see('Nobody comes before nine.');
		await investigator.page.goto(`${base}?version=2`);
		await investigator.see('1 open, 0 resolved comments');
		await lookAt(investigator, 'comment');
		await investigator.press('Resolve: Booking, Starts');
		await investigator.see('0 open, 1 resolved comments');
	});

	test('prints with its schedule on one page, on A4 and Letter', async () => {
		const { page } = investigator;
		for (const [paper, width, height] of [
			['a4', 794, 1123],
			['letter', 816, 1056]
		] as const) {
			await page.goto(`${base}/print?version=2&paper=${paper}`);
			const pdf = (await page.pdf({ preferCSSPageSize: true })).toString('latin1');
			const sizes = new Set(
				[...pdf.matchAll(/\/MediaBox\s*\[0 0 ([\d.]+) ([\d.]+)\]/g)].map(
					([, w, h]) => `${Math.round(Number(w) / 0.75)} ${Math.round(Number(h) / 0.75)}`
				)
			);
			expect([paper, ...sizes]).toEqual([paper, `${width - (paper === 'a4' ? 1 : 0)} ${height}`]);
			await page.emulateMedia({ media: 'print' });
			await page.setViewportSize({ width: width - 113, height });
			const box = await page.locator('#schedule').boundingBox();
			expect(box?.height).toBeLessThan(height - 121);
			await page.emulateMedia({ media: 'screen' });
			await page.setViewportSize({ width: 1440, height: 900 });
		}
		await investigator.see(/\d+ of \d+ items are gaps/);
		await lookAt(investigator, 'print');
	});

	test('is exported with a hash that can be checked, and imported as an equal draft', async () => {
		const { page } = investigator;
		await page.goto(`${base}/export?version=2`);
		await lookAt(investigator, 'export');
		const reply = await page.request.get(`${base}/export/json?version=2`);
		const text = await reply.text();
		const exported = JSON.parse(text) as { hash: string; content: unknown };
		expect(sha256Hex(canonicalJson(exported.content))).toBe(exported.hash);
		await page
			.getByLabel('Exported protocol')
			.setInputFiles({ name: 'p.json', mimeType: 'application/json', buffer: Buffer.from(text) });
		await investigator.press('Import as a draft');
		await page.waitForURL(/\/draft$/);
		await page.goto(`${base}/freeze`);
		await investigator.see('Nothing that you may read differs.');
		const shut = await coordinator.page.request.get(`${base}/export/json?version=2`);
		expect(shut.status()).toBe(404);
	});

	test('keeps the letter of its approval, byte for byte', async () => {
		const { page } = investigator;
		await page.goto(`${base}?version=2`);
		const letter = Buffer.from('%PDF-1.7\nletter of an invented board\n%%EOF\n');
		await page
			.getByLabel('File', { exact: true })
			.setInputFiles({ name: 'letter.pdf', mimeType: 'application/pdf', buffer: letter });
		await investigator.press('Keep this letter');
		await investigator.see(/^The letter is kept, checksum [0-9a-f]{12}\.$/);
		const href = await page.getByRole('link', { name: 'letter.pdf' }).getAttribute('href');
		const reply = await page.request.get(new URL(href ?? '', app.origin).href);
		const kept = createHash('sha256')
			.update(await reply.body())
			.digest('hex');
		expect(kept).toBe(createHash('sha256').update(letter).digest('hex'));
		expect(reply.headers()['content-disposition']).toContain('attachment');
		investigator.expectNoComplaints();
	});
});

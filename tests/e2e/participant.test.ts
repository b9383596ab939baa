import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { eq } from 'drizzle-orm';
import { createClock } from '$lib/server/clock';
import { openDatabase, type DatabaseHandle } from '$lib/server/db/client';
import { booking, lab, room } from '$lib/server/db/schema';
import { enqueueInvitations } from '$lib/server/invitations/enqueue-invitations';
import { enqueueCancellation, enqueueMove } from '$lib/server/invitations/enqueue-visit-change';
import type { MailSetting } from '$lib/server/invitations/mail-setting';
import { createPeopleKeys, type PeopleKeys } from '$lib/server/keys/people-keys';
import { startApp, type AppServer } from '../support/app-server';
import { findAxeFaults } from '../support/axe';
import { openBrowser, type Screen, type TestBrowser } from '../support/browser';
import { linkIn } from '../support/mailbox';
import { plantLab, plantStudy, type PlantedStudy } from '../support/planted-study';
import { plantBooking, plantParticipant, shiftBooking } from '../support/planted-visit';
import { keepScreenshot } from '../support/screenshot';

const HOUR_MS = 3_600_000;
const clock = createClock(0);
/** A visit some weeks from now, at a full hour. */
const startMs = Math.ceil(clock.now() / HOUR_MS) * HOUR_MS + 45 * 24 * HOUR_MS;

let app: AppServer;
let owner: DatabaseHandle;
let keys: PeopleKeys;
let setting: MailSetting;
let home: PlantedStudy;
let browser: TestBrowser;
let screen: Screen;

beforeAll(async () => {
	[app, browser] = await Promise.all([startApp('own'), openBrowser()]);
	owner = openDatabase(app.database.ownerUrl);
	const { OVALRY_KEYS: folder = '', OVALRY_WRAPPING_KEY: wrappingKey = '' } = app.environment;
	keys = createPeopleKeys({ folder, wrappingKey });
	const fromAddress = app.environment.MAIL_FROM ?? 'lab@ovalry.example';
	setting = { keys: keys.folder, origin: app.origin, fromAddress };
	home = await plantStudy(owner.db, await plantLab(owner.db));
	await owner.db.update(lab).set({ phone: '+351 000 000 000', address: 'Quay House, Cais 2' });
	await owner.db.update(room).set({ directions: 'Second floor, ring at the glass door.' });
	screen = await browser.openScreen({ screen: 'phone', timeZone: 'America/New_York' });
});
afterAll(async () => {
	await browser?.close();
	await owner?.end();
	await app?.stop();
});

/** Somebody who has just been invited: their address, their visit and the link in their mail. */
async function invite(visitStartMs: number) {
	const { participantId, email } = await plantParticipant(owner.db, keys, home);
	const visit = { participantId, visitNumber: 1, startMs: visitStartMs };
	const bookingId = await plantBooking(owner.db, home, visit);
	await owner.db.transaction((tx) => enqueueInvitations(tx, clock, setting, participantId));
	const mail = await app.mailbox.waitFor(email);
	return { email, bookingId, link: linkIn(mail, /\/visit\//) };
}
const stored = async (bookingId: string) => {
	const [row] = await owner.db.select().from(booking).where(eq(booking.id, bookingId));
	return row;
};

describe('a participant with a phone', () => {
	it('opens the link, reads when, where and whom to call, and answers', async () => {
		const { link, bookingId } = await invite(startMs);
		const { page } = screen;
		await page.goto(link);
		await page.getByText('Your clock, New York').waitFor();
		expect(await page.getByText('The laboratory’s clock, Lisbon').isVisible()).toBe(true);
		expect(await page.getByText('Second floor, ring at the glass door.').isVisible()).toBe(true);
		expect(await page.getByRole('link', { name: '+351 000 000 000' }).isVisible()).toBe(true);
		expect(await page.getByRole('radio').count()).toBe(3);
		expect(await page.locator('input:checked').count()).toBe(0);
		await keepScreenshot(page, 'participant-visit-phone');
		expect(await findAxeFaults(page)).toEqual([]);
		await page.getByText('I ask for another time').click();
		await page.getByRole('button', { name: 'Send my answer' }).click();
		await page.getByText('Write when you could come').waitFor();
		await page.getByLabel('Your words to the laboratory').fill('Tuesday after 15:00');
		await page.getByRole('button', { name: 'Send my answer' }).click();
		await page.getByText('You asked for another time.').waitFor();
		await keepScreenshot(page, 'participant-answered-phone');
		expect(await findAxeFaults(page)).toEqual([]);
		expect((await stored(bookingId))?.answer).toBe('asks-other-time');
		expect(screen.complaints).toEqual([]);
	});

	it('answers without script, and no opening of the link changes anything before (case T20)', async () => {
		const { link, bookingId } = await invite(startMs + 3 * HOUR_MS);
		for (const method of [
			'GET',
			'HEAD',
			'GET',
			'HEAD',
			'GET',
			'HEAD',
			'GET',
			'HEAD',
			'GET',
			'HEAD'
		]) {
			const reply = await fetch(link, { method });
			expect(reply.status).toBe(200);
			expect(reply.headers.get('referrer-policy')).toBe('strict-origin');
			expect(reply.headers.get('cache-control')).toMatch(/no-store/);
		}
		expect((await stored(bookingId))?.answer).toBe('none');
		const plain = await browser.openScreen({ screen: 'phone', javaScript: false });
		await plain.page.goto(link);
		await plain.page.getByText('I come', { exact: true }).click();
		await plain.page.getByRole('button', { name: 'Send my answer' }).click();
		await plain.page.getByText('You said that you come.').waitFor();
		expect((await stored(bookingId))?.answer).toBe('accepted');
		await plain.close();
	});

	it('is told by an old link that the visit moved, and answers by the new one', async () => {
		const { link, bookingId, email } = await invite(startMs + 6 * HOUR_MS);
		await owner.db.transaction(async (tx) => {
			await shiftBooking(tx, bookingId, startMs + 9 * HOUR_MS);
			await enqueueMove(tx, clock, setting, bookingId);
		});
		const update = await app.mailbox.waitFor(email, (mail) =>
			mail.subject.startsWith('Visit moved')
		);
		const { page } = screen;
		await page.goto(link);
		await page.getByText('This visit was changed after that mail').waitFor();
		expect(await page.getByRole('radio').count()).toBe(0);
		expect(await page.getByText('+351 000 000 000').isVisible()).toBe(true);
		await keepScreenshot(page, 'participant-old-link-phone');
		const refused = await fetch(link, {
			method: 'POST',
			headers: {
				accept: 'text/html',
				origin: app.origin,
				'content-type': 'application/x-www-form-urlencoded'
			},
			body: 'answer=accepted&note='
		});
		expect(refused.status).toBe(409);
		await page.goto(linkIn(update, /\/visit\//));
		await page.getByText('I come', { exact: true }).click();
		await page.getByRole('button', { name: 'Send my answer' }).click();
		await page.getByText('You said that you come.').waitFor();
	});

	it('sees that a visit is cancelled', async () => {
		const { link, bookingId, email } = await invite(startMs + 12 * HOUR_MS);
		await owner.db.transaction(async (tx) => {
			await tx.update(booking).set({ state: 'cancelled' }).where(eq(booking.id, bookingId));
			await enqueueCancellation(tx, clock, setting, bookingId);
		});
		await app.mailbox.waitFor(email, (mail) => mail.subject.startsWith('Visit cancelled'));
		await screen.page.goto(link);
		await screen.page.getByText('This visit is cancelled').waitFor();
		await keepScreenshot(screen.page, 'participant-cancelled-phone');
	});

	it('stops taking part in two presses', async () => {
		const { link } = await invite(startMs + 15 * HOUR_MS);
		const { page } = screen;
		await page.goto(link);
		await page.getByRole('link', { name: 'stop here' }).click();
		await page.getByRole('heading', { name: 'Stop taking part?' }).waitFor();
		await keepScreenshot(page, 'participant-stop-phone');
		expect(await findAxeFaults(page)).toEqual([]);
		await page.getByRole('button', { name: 'Stop taking part' }).click();
		await page.getByText('You asked to stop taking part').waitFor();
		await keepScreenshot(page, 'participant-stopped-phone');
		expect(screen.complaints).toEqual([]);
	});

	it('finds a wrong link answered like any address that does not exist', async () => {
		const reply = await fetch(`${app.origin}/visit/${'x'.repeat(43)}`);
		expect(reply.status).toBe(404);
	});

	it('leaves no token and no address in the logs', async () => {
		const { link, email } = await invite(startMs + 18 * HOUR_MS);
		await fetch(link);
		const token = link.split('/').at(-1) ?? '';
		const logs = `${app.readLog('web')}${app.readLog('worker')}`;
		expect(logs).toContain('/visit/[token]');
		expect(logs).not.toContain(token);
		expect(logs).not.toContain(email);
	});
});

describe('the same page on a wide screen in the dark', () => {
	it('reads well and has no serious fault', async () => {
		const { link } = await invite(startMs + 21 * HOUR_MS);
		const wide = await browser.openScreen({ theme: 'dark' });
		await wide.page.goto(link);
		await wide.page.getByText('Can you come?').waitFor();
		await keepScreenshot(wide.page, 'participant-visit-dark');
		expect(await findAxeFaults(wide.page)).toEqual([]);
		expect(wide.complaints).toEqual([]);
		await wide.close();
	});
});

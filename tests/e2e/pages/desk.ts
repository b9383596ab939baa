import { expect } from 'vitest';
import { findAxeFaults } from '../../support/axe';
import type { AppServer } from '../../support/app-server';
import type { Screen, ScreenOptions, TestBrowser } from '../../support/browser';
import { linkIn } from '../../support/mailbox';
import { keepScreenshot } from '../../support/screenshot';
import { createHands, type HandsKind } from './hands';

/** One person at their own browser, and what a person can do with a page: look, type, press. */
export type Desk = ReturnType<typeof createDesk>;

type Words = string | RegExp;

export function createDesk(screen: Screen, app: AppServer, kind: HandsKind = 'pointer') {
	const { page } = screen;
	const hands = createHands(kind);
	// Somebody listens from the start: the browser then always hands its choosers over.
	if (kind === 'keyboard') page.on('filechooser', () => undefined);
	const button = (name: Words) => page.getByRole('button', { name });
	const link = (name: Words) => page.getByRole('link', { name });
	const controls = page.locator('input, textarea, select');
	const field = (label: Words) =>
		page.getByLabel(label, { exact: typeof label === 'string' }).and(controls);
	return {
		screen,
		page,
		app,
		hands,
		/** Types an address of the application, as somebody does who keeps it as a bookmark. */
		open: (path: string) => page.goto(new URL(path, app.origin).href),
		path: () => new URL(page.url()).pathname,
		button,
		link,
		field,
		press: (name: Words) => hands.press(button(name)),
		follow: (name: Words) => hands.press(link(name).first()),
		fill: (label: Words, text: string) => hands.write(field(label), text),
		choose: (label: Words, option: string) => hands.pick(field(label), option),
		tick: (role: 'checkbox' | 'radio', name: Words) => hands.tick(page.getByRole(role, { name })),
		/** Waits until the words can be read. */
		see: (words: Words) => page.getByText(words).filter({ visible: true }).first().waitFor(),
		/** How often the words can be read now. */
		count: (words: Words) => page.getByText(words).filter({ visible: true }).count(),
		/** Opens a section of the study by the masthead. */
		async section(name: string) {
			const way = page.getByRole('navigation').getByRole('link', { name, exact: true });
			await hands.press(way.first());
			await page.waitForURL((url) => url.pathname.includes(name.toLowerCase()));
		},
		keep: (name: string) =>
			keepScreenshot(page, `${kind === 'pointer' ? 'journey' : 'keyboard'}-${name}`),
		expectNoAxeFaults: async () => expect(await findAxeFaults(page)).toEqual([]),
		expectNoComplaints: () => expect(screen.complaints).toEqual([])
	};
}

export async function sitDown(
	browser: TestBrowser,
	app: AppServer,
	{ hands, ...options }: ScreenOptions & { hands?: HandsKind } = {}
): Promise<Desk> {
	return createDesk(await browser.openScreen(options), app, hands);
}

/** Opens the newest sign-in link in the mailbox and presses its one button. */
export async function signInByMail(desk: Desk, email: string): Promise<void> {
	const mail = await desk.app.mailbox.waitFor(email, ({ text }) =>
		text.includes('/signin/confirm')
	);
	await desk.page.goto(linkIn(mail, /confirm/));
	await desk.press('Sign in');
	await desk.see(/Good to see you/);
}

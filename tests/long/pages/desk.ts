import { expect } from 'vitest';
import { findAxeFaults } from '../../support/axe';
import type { AppServer } from '../../support/app-server';
import type { Screen, ScreenOptions, TestBrowser } from '../../support/browser';
import { linkIn } from '../../support/mailbox';
import { keepScreenshot } from '../../support/screenshot';

/** One person at their own browser, and what a person can do with a page: look, type, press. */
export type Desk = ReturnType<typeof createDesk>;

type Words = string | RegExp;

export function createDesk(screen: Screen, app: AppServer) {
	const { page } = screen;
	const button = (name: Words) => page.getByRole('button', { name });
	const link = (name: Words) => page.getByRole('link', { name });
	const controls = page.locator('input, textarea, select');
	const field = (label: Words) =>
		page.getByLabel(label, { exact: typeof label === 'string' }).and(controls);
	return {
		screen,
		page,
		app,
		/** Types an address of the application, as somebody does who keeps it as a bookmark. */
		open: (path: string) => page.goto(new URL(path, app.origin).href),
		path: () => new URL(page.url()).pathname,
		button,
		link,
		field,
		press: (name: Words) => button(name).click(),
		follow: (name: Words) => link(name).first().click(),
		fill: (label: Words, text: string) => field(label).fill(text),
		choose: (label: Words, option: string) => field(label).selectOption({ label: option }),
		/** Waits until the words can be read. */
		see: (words: Words) => page.getByText(words).filter({ visible: true }).first().waitFor(),
		/** How often the words can be read now. */
		count: (words: Words) => page.getByText(words).filter({ visible: true }).count(),
		/** Opens a section of the study by the masthead. */
		async section(name: string) {
			await page.getByRole('navigation').getByRole('link', { name, exact: true }).first().click();
			await page.waitForURL((url) => url.pathname.includes(name.toLowerCase()));
		},
		keep: (name: string) => keepScreenshot(page, `journey-${name}`),
		expectNoAxeFaults: async () => expect(await findAxeFaults(page)).toEqual([]),
		expectNoComplaints: () => expect(screen.complaints).toEqual([])
	};
}

export async function sitDown(
	browser: TestBrowser,
	app: AppServer,
	options?: ScreenOptions
): Promise<Desk> {
	return createDesk(await browser.openScreen(options), app);
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

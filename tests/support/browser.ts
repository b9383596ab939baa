import { existsSync } from 'node:fs';
import { chromium, type Browser, type BrowserContext, type Page } from 'playwright-core';

const sizes = {
	desktop: { viewport: { width: 1440, height: 900 } },
	phone: { viewport: { width: 390, height: 844 }, isMobile: true, hasTouch: true }
};

export type ScreenKind = keyof typeof sizes;

export type ScreenOptions = {
	screen?: ScreenKind;
	theme?: 'light' | 'dark';
	/** IANA zone of the person's computer. */
	timeZone?: string;
	javaScript?: boolean;
};

/** One person's browser window: own cookies, and a list of everything the page complained about. */
export type Screen = {
	context: BrowserContext;
	page: Page;
	/** Console errors, content-security-policy messages and uncaught errors, as they came. */
	complaints: string[];
	close(): Promise<void>;
};

export type TestBrowser = {
	openScreen(options?: ScreenOptions): Promise<Screen>;
	close(): Promise<void>;
};

/** Starts Debian's Chromium. */
export async function openBrowser(): Promise<TestBrowser> {
	const browser = await chromium.launch({ executablePath: findChromium(), args: launchOptions() });
	return {
		openScreen: (options = {}) => openScreen(browser, options),
		close: () => browser.close()
	};
}

async function openScreen(browser: Browser, options: ScreenOptions): Promise<Screen> {
	const context = await browser.newContext({
		...sizes[options.screen ?? 'desktop'],
		colorScheme: options.theme ?? 'light',
		timezoneId: options.timeZone ?? 'Europe/Berlin',
		locale: 'en-GB',
		reducedMotion: 'reduce',
		javaScriptEnabled: options.javaScript ?? true
	});
	context.setDefaultTimeout(30_000);
	const complaints: string[] = [];
	context.on('page', (page) => listen(page, complaints));
	const page = await context.newPage();
	return { context, page, complaints, close: () => context.close() };
}

/** Failed requests that a page answers on purpose (404 pages) show up as console errors; keep them apart. */
const expectedReply = /Failed to load resource: the server responded with a status of 4\d\d/;

function listen(page: Page, complaints: string[]): void {
	page.on('pageerror', (error) => complaints.push(`${page.url()}: uncaught ${error.message}`));
	page.on('console', (message) => {
		const text = message.text();
		const isPolicy = /Content[- ]Security[- ]Policy/i.test(text);
		if (!isPolicy && (message.type() !== 'error' || expectedReply.test(text))) return;
		complaints.push(`${page.url()}: ${text}`);
	});
}

function findChromium(): string {
	const places = ['/usr/bin/chromium', '/usr/bin/chromium-browser', '/usr/bin/google-chrome'];
	const found = places.find((place) => existsSync(place));
	if (found) return found;
	throw new Error('Chromium is missing: apt-get install chromium');
}

/** Chromium's own sandbox does not work for root. */
function launchOptions(): string[] {
	const always = ['--disable-gpu', '--disable-dev-shm-usage', '--font-render-hinting=none'];
	return process.getuid?.() === 0 ? [...always, '--no-sandbox'] : always;
}

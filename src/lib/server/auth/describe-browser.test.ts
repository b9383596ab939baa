import { expect, test } from 'vitest';
import { describeBrowser } from './describe-browser';

test.each([
	['Mozilla/5.0 (X11; Linux x86_64; rv:140.0) Gecko/20100101 Firefox/140.0', 'Firefox on Linux'],
	[
		'Mozilla/5.0 (Windows NT 10.0; Win64; x64) AppleWebKit/537.36 (KHTML, like Gecko) Chrome/140.0.0.0 Safari/537.36 Edg/140.0.0.0',
		'Edge on Windows'
	],
	[
		'Mozilla/5.0 (iPhone; CPU iPhone OS 18_0 like Mac OS X) AppleWebKit/605.1.15 (KHTML, like Gecko) Version/18.0 Mobile/15E148 Safari/604.1',
		'Safari on iPhone'
	],
	[
		'Mozilla/5.0 (X11; Linux x86_64) AppleWebKit/537.36 (KHTML, like Gecko) HeadlessChrome/140.0.0.0 Safari/537.36',
		'Chrome on Linux'
	],
	['curl/8.0', 'Unknown browser'],
	['', 'Unknown browser']
])('%s is named so that its owner knows it', (userAgent, name) => {
	expect(describeBrowser(userAgent)).toBe(name);
});

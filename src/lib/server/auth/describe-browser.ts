const browsers: [RegExp, string][] = [
	[/\bEdg(e|A|iOS)?\//, 'Edge'],
	[/\b(OPR|Opera)\//, 'Opera'],
	[/\b(Firefox|FxiOS)\//, 'Firefox'],
	[/\b(HeadlessChrome|Chrome|CriOS)\//, 'Chrome'],
	[/\bVersion\/.*Safari\//, 'Safari']
];
const systems: [RegExp, string][] = [
	[/\b(iPhone|iPod)\b/, 'iPhone'],
	[/\biPad\b/, 'iPad'],
	[/\bAndroid\b/, 'Android'],
	[/\bWindows\b/, 'Windows'],
	[/\bMac OS X\b/, 'Mac'],
	[/\bCrOS\b/, 'ChromeOS'],
	[/\bLinux\b/, 'Linux']
];

/**
 * A browser in words that its owner recognises; versions and the rest are not kept.
 *
 * @example describeBrowser('Mozilla/5.0 (X11; Linux x86_64; rv:140.0) ... Firefox/140.0') // 'Firefox on Linux'
 */
export function describeBrowser(userAgent: string): string {
	const find = (names: [RegExp, string][]) =>
		names.find(([pattern]) => pattern.test(userAgent))?.[1];
	const browser = find(browsers);
	const system = find(systems);
	if (!browser) return system ? `A browser on ${system}` : 'Unknown browser';
	return system ? `${browser} on ${system}` : browser;
}

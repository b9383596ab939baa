import { describe, expect, it } from 'vitest';
import { writeMemberInvitation, writeSignInMail } from '$lib/server/invitations/team-mail';
import { writeVisitMail } from '$lib/server/invitations/visit-mail';
import { visitMailFacts } from '../../../../tests/support/visit-mail-facts';
import type { MailContent } from './mail-content';
import { renderMailHtml } from './render-mail-html';
import { renderMailText } from './render-mail-text';

const link = 'https://ovalry.example/signin/confirm?token=x&email=a%40b.example';
const mails: [string, MailContent][] = [
	['invitation', writeVisitMail(visitMailFacts()).content],
	['cancellation', writeVisitMail(visitMailFacts({ kind: 'cancelled' })).content],
	['sign-in', writeSignInMail({ link, validMinutes: 30 }).content],
	[
		'member invitation',
		writeMemberInvitation({
			link,
			labName: 'Tidewater Movement Lab',
			labZone: 'Europe/Lisbon',
			inviterName: 'Ines Faro',
			roles: ['coordinator of “Practising a sliding movement”'],
			expiresAtMs: Date.parse('2027-03-18T12:00Z')
		}).content
	]
];

describe('a mail as HTML (checklist 44)', () => {
	it.each(mails)(
		'names language and direction twice and has a title and headings: %s',
		(_n, mail) => {
			const html = renderMailHtml(mail);
			expect(html.match(/lang="en" dir="ltr"/g)).toHaveLength(2);
			expect(html).toMatch(/<title>[^<]+<\/title>/);
			expect(html.match(/<h1/g)).toHaveLength(1);
		}
	);

	it.each(mails)('fetches nothing and runs nothing: %s', (_name, mail) => {
		const html = renderMailHtml(mail);
		expect(html).not.toMatch(/<(img|script|link|iframe|svg|object|style)|url\(|@import| on\w+=/i);
		const addresses = [...html.matchAll(/(?:src|href)="([^"]+)"/g)].map((match) => match[1]);
		expect(addresses.every((address) => address?.startsWith('https://ovalry.example/'))).toBe(true);
	});

	it.each(mails)('reads at a contrast of at least 4.5 to 1: %s', (_name, mail) => {
		const html = renderMailHtml(mail);
		const styles = [...html.matchAll(/style="([^"]*)"/g)].map((match) => match[1] ?? '');
		const pairs = styles.flatMap((style) => {
			const text = /(?:^|;)color:(#\w{6})/.exec(style)?.[1];
			const back = /background:(#\w{6})/.exec(style)?.[1] ?? '#FFFFFF';
			return text ? [contrast(text, back)] : [];
		});
		expect(pairs.length).toBeGreaterThan(2);
		expect(Math.min(...pairs)).toBeGreaterThanOrEqual(4.5);
	});

	it('writes what people typed as text, never as markup', () => {
		const evil = '<script>alert(1)</script>"&\u2028';
		const participant = { name: evil, zone: 'Europe/Berlin' };
		const html = renderMailHtml(writeVisitMail(visitMailFacts({ participant })).content);
		expect(html).not.toContain('<script>');
		expect(html).toContain('&lt;script&gt;alert(1)&lt;/script&gt;&quot;&amp;');
	});

	it('uses no "click here": each link says what it does', () => {
		for (const [, mail] of mails) {
			const texts = [...renderMailHtml(mail).matchAll(/<a [^>]*>([^<]+)</g)].map((m) => m[1] ?? '');
			expect(texts.filter((linkText) => /here|^link$/i.test(linkText))).toEqual([]);
		}
	});
});

describe('a mail as plain text (checklist 43)', () => {
	it.each(mails)('holds every word and link that the HTML holds: %s', (_name, mail) => {
		const squeeze = (text: string) => text.replace(/[\s-]+/g, ' ').trim();
		const html = renderMailHtml(mail).replace(/<head>[\s\S]*<\/head>/, '');
		const words = html
			.replace(/<[^>]+>/g, '\n')
			.replaceAll('&amp;', '&')
			.split('\n')
			.map(squeeze)
			.filter((word) => word !== '');
		const text = squeeze(renderMailText(mail));
		expect(words.filter((word) => !text.includes(word))).toEqual([]);
		for (const block of mail.blocks)
			if (block.kind === 'link') expect(text).toContain(squeeze(block.url));
	});
});

/** WCAG 2.2 contrast ratio of two colours. */
function contrast(a: string, b: string): number {
	const [bright, dark] = [luminance(a), luminance(b)].sort((x, y) => y - x) as [number, number];
	return (bright + 0.05) / (dark + 0.05);
}

function luminance(colour: string): number {
	const channels = [1, 3, 5].map((at) => parseInt(colour.slice(at, at + 2), 16) / 255);
	const [r = 0, g = 0, b = 0] = channels.map((c) =>
		c <= 0.03928 ? c / 12.92 : ((c + 0.055) / 1.055) ** 2.4
	);
	return 0.2126 * r + 0.7152 * g + 0.0722 * b;
}

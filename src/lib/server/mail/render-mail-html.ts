import { cleanText } from './clean-text';
import type { MailBlock, MailContent } from './mail-content';

const INK = '#1B2430';
const MUTED = '#5C6673';
const RULE = '#DAD5C8';
const SPRUCE = '#1F5C4D';
const FONT = "'Atkinson Hyperlegible Next', Verdana, Arial, sans-serif";

/**
 * The mail as HTML: readable without its styles, by a screen reader and at any width; no image, no
 * script and nothing fetched from anywhere.
 */
export function renderMailHtml(content: MailContent): string {
	const lang = `lang="${escaped(content.language)}" dir="${content.direction}"`;
	const title = escaped(content.title);
	return `<!doctype html>
<html ${lang}>
<head>
<meta charset="utf-8">
<meta name="viewport" content="width=device-width, initial-scale=1">
<meta name="color-scheme" content="light">
<title>${title}</title>
</head>
<body style="margin:0;background:#FFFFFF;">
<div ${lang} style="max-width:36em;margin:0 auto;padding:24px 20px;background:#FFFFFF;color:${INK};font-family:${FONT};font-size:16px;line-height:1.5;">
<h1 style="font-size:24px;line-height:1.25;margin:0 0 16px;">${title}</h1>
${content.blocks.map(blockHtml).join('\n')}
<p style="margin:28px 0 0;padding-top:12px;border-top:1px solid ${RULE};color:${MUTED};font-size:14px;">${lines(content.footer)}</p>
</div>
</body>
</html>
`;
}

function blockHtml(block: MailBlock): string {
	switch (block.kind) {
		case 'paragraph':
			return `<p style="margin:0 0 16px;">${lines(block.text)}</p>`;
		case 'heading':
			return `<h2 style="font-size:18px;margin:24px 0 8px;">${escaped(block.text)}</h2>`;
		case 'facts':
			return `<dl style="margin:0 0 16px;border-top:1px solid ${RULE};">\n${block.rows.map(factHtml).join('\n')}\n</dl>`;
		case 'link':
			return `<p style="margin:16px 0;"><a href="${escaped(block.url)}" style="display:inline-block;padding:12px 20px;border-radius:10px;background:${SPRUCE};color:#FFFFFF;font-weight:bold;text-decoration:none;">${escaped(block.text)}</a></p>`;
	}
}

function factHtml({ label, value }: { label: string; value: string }): string {
	return `<dt style="margin:8px 0 0;color:${MUTED};font-size:14px;">${escaped(label)}</dt>
<dd style="margin:0;padding:0 0 8px;border-bottom:1px solid ${RULE};font-weight:bold;">${lines(value)}</dd>`;
}

function lines(text: string): string {
	return escaped(text).replaceAll('\n', '<br>');
}

function escaped(text: string): string {
	return cleanText(text)
		.replaceAll('&', '&amp;')
		.replaceAll('<', '&lt;')
		.replaceAll('>', '&gt;')
		.replaceAll('"', '&quot;');
}

import { cleanText } from './clean-text';
import type { MailBlock, MailContent } from './mail-content';

/** The mail as plain text, complete by itself. */
export function renderMailText(content: MailContent): string {
	const parts = [cleanText(content.title), ...content.blocks.map(blockText)];
	return `${parts.join('\n\n')}\n\n-- \n${cleanText(content.footer)}\n`;
}

function blockText(block: MailBlock): string {
	switch (block.kind) {
		case 'paragraph':
			return cleanText(block.text);
		case 'heading':
			return `${cleanText(block.text)}\n${'-'.repeat([...block.text].length)}`;
		case 'facts':
			return block.rows.map((row) => `${row.label}: ${indented(cleanText(row.value))}`).join('\n');
		case 'link':
			return `${cleanText(block.text)}:\n${block.url}`;
	}
}

function indented(text: string): string {
	return text.replaceAll('\n', '\n  ');
}

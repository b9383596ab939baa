export interface TextPart {
	text: string;
	/** True for a number, a time or a code such as TW-017. */
	figure: boolean;
}

const figure = /[A-Z]{2,}-\d[\dA-Z-]*|[-+−±]?(?:\d[\d,]*(?:[.:]\d+)*|\.\d+)/g;

/** Cuts a sentence where its numbers, clock times and codes begin and end; joined it is the same text. */
export function splitFigures(text: string): TextPart[] {
	const parts: TextPart[] = [];
	let from = 0;
	for (const match of text.matchAll(figure)) {
		const found = trimEnd(match[0]);
		if (isInsideWord(text, match.index)) continue;
		if (match.index > from) parts.push({ text: text.slice(from, match.index), figure: false });
		parts.push({ text: found, figure: true });
		from = match.index + found.length;
	}
	if (from < text.length) parts.push({ text: text.slice(from), figure: false });
	return parts;
}

/** A comma that ends a clause is no part of the number. */
function trimEnd(found: string): string {
	return found.replace(/,+$/, '');
}

function isInsideWord(text: string, index: number): boolean {
	return index > 0 && /[\p{L}\d]/u.test(text.charAt(index - 1));
}

export type Line = { number: number; text: string };
export type LineFault = { line: number; message: string };

/** The lines of a pasted text that hold something, each with its number in the text. */
export function numberedLines(text: string): Line[] {
	return text
		.split(/\r?\n/)
		.map((line, index) => ({ number: index + 1, text: line.trim() }))
		.filter((line) => line.text !== '');
}

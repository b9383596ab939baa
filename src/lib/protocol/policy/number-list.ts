/** Numbers as they are typed side by side: '0.8 0.7; 0.6'. Null when a part is no number. */
export function readNumberList(text: string): number[] | null {
	const parts = text.split(/[\s,;]+/).filter((part) => part !== '');
	const numbers = parts.map((part) => Number(part.replace('−', '-')));
	return numbers.every((number) => Number.isFinite(number)) ? numbers : null;
}

export function writeNumberList(value: unknown): string {
	return Array.isArray(value) ? value.join(', ') : typeof value === 'string' ? value : '';
}

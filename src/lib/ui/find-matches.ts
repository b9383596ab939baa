/** How well a name answers what was typed; null when not every word of it is found. */
function scoreMatch(typed: readonly string[], name: string): number | null {
	const words = name
		.toLowerCase()
		.split(/[^\p{L}\p{N}]+/u)
		.filter(Boolean);
	let score = 0;
	for (const part of typed) {
		const found = Math.max(...words.map((word, index) => scoreWord(part, word) - index * 0.01), 0);
		if (found === 0) return null;
		score += found;
	}
	return score - words.length * 0.001;
}

/** Whole word, beginning, inside, or its letters in this order from the first one on. */
function scoreWord(part: string, word: string): number {
	if (word === part) return 4;
	if (word.startsWith(part)) return 3;
	if (part.length > 1 && word.includes(part)) return 2;
	if (part.length < 2 || word[0] !== part[0]) return 0;
	let at = 0;
	for (const letter of word) if (letter === part[at]) at += 1;
	return at === part.length ? 1 : 0;
}

/** What answers the words that were typed, best first; everything in its order while nothing is. */
export function findMatches<Item>(
	typed: string,
	items: readonly Item[],
	nameOf: (item: Item) => string
): Item[] {
	const parts = typed.toLowerCase().split(/\s+/).filter(Boolean);
	if (parts.length === 0) return [...items];
	return items
		.map((item) => ({ item, score: scoreMatch(parts, nameOf(item)) }))
		.filter(({ score }) => score !== null)
		.sort((a, b) => (b.score ?? 0) - (a.score ?? 0))
		.map(({ item }) => item);
}

/** How many letters must be changed, put in or taken out to make one word of another (Levenshtein). */
export function editDistance(a: string, b: string): number {
	let row = Array.from({ length: b.length + 1 }, (_, j) => j);
	for (let i = 1; i <= a.length; i++) {
		const next = [i];
		for (let j = 1; j <= b.length; j++) {
			const change = (row[j - 1] ?? 0) + (a[i - 1] === b[j - 1] ? 0 : 1);
			next.push(Math.min(change, (row[j] ?? 0) + 1, (next[j - 1] ?? 0) + 1));
		}
		row = next;
	}
	return row[b.length] ?? 0;
}

/** The word that was probably meant; null when none is near. */
export function nearestWord(typed: string, words: readonly string[]): string | null {
	const wanted = typed.trim().toLowerCase();
	const allowed = wanted.length <= 4 ? 1 : 2;
	const near = words
		.map((word) => ({ word, distance: editDistance(wanted, word.toLowerCase()) }))
		.filter(({ distance }) => distance <= allowed)
		.sort((a, b) => a.distance - b.distance);
	return near[0]?.word ?? null;
}

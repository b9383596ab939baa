import type { Answer } from './ask-everything';

/**
 * What is random by design, or sealed: each is replaced by its kind and a number, in order of first
 * appearance, so that two answers agree only where the same value stands in the same places. Sealed
 * text keeps its length.
 */
const drawn: [kind: string, pattern: RegExp][] = [
	['sealed', /\beyJ[\w-]+\.[\w-]*\.[\w-]+\.[\w-]+\.[\w-]+\b/g],
	['id', /\b[0-9a-f]{8}-[0-9a-f]{4}-4[0-9a-f]{3}-[89ab][0-9a-f]{3}-[0-9a-f]{12}\b/g],
	['key', /(?<="(?:x|kid)": ")[\w-]{43}(?=")/g],
	['hash', /(?<![\w-])[0-9a-f]{64}(?![\w-])/g],
	['nonce', /(?<=nonce[-=]"?)[A-Za-z0-9+/]{22}==/g]
];

/** Answers to one reader in the order asked, with everything drawn replaced by placeholders. */
export function replaceDrawn(answers: readonly Answer[]): string[] {
	const known = new Map<string, string>();
	const counts = new Map<string, number>();
	const placeholder = (kind: string, value: string) => {
		const earlier = known.get(value);
		if (earlier) return earlier;
		const count = (counts.get(kind) ?? 0) + 1;
		counts.set(kind, count);
		const made = `<${kind} ${count}, ${value.length} characters>`;
		known.set(value, made);
		return made;
	};
	return answers.map(({ ask, status, headers, body }) =>
		drawn.reduce(
			(text, [kind, pattern]) => text.replace(pattern, (value) => placeholder(kind, value)),
			[ask, status, ...headers, body].join('\n')
		)
	);
}

/** Where two readers' answers differ, one line each; empty when every byte agrees. */
export function findDifferences(first: readonly Answer[], second: readonly Answer[]): string[] {
	const [ours, theirs] = [replaceDrawn(first), replaceDrawn(second)];
	const differences: string[] = [];
	if (ours.length !== theirs.length) {
		differences.push(`${ours.length} answers against ${theirs.length}`);
	}
	for (const [index, text] of ours.entries()) {
		const other = theirs[index];
		if (other === undefined || other === text) continue;
		const place = firstDifference(text, other);
		const around = (all: string) => JSON.stringify(all.slice(Math.max(0, place - 90), place + 90));
		differences.push(`${first[index]?.ask}: ${around(text)} against ${around(other)}`);
	}
	return differences;
}

function firstDifference(a: string, b: string): number {
	let place = 0;
	while (place < a.length && a[place] === b[place]) place += 1;
	return place;
}

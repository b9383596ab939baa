import type { ProtocolDraft } from './protocol-draft';

export type DraftDifference = { place: string; theirs: string; mine: string };

/** Every single value in which two drafts differ, by its path. */
export function listDraftDifferences(
	theirs: ProtocolDraft,
	mine: ProtocolDraft
): DraftDifference[] {
	const [left, right] = [readLeaves(theirs), readLeaves(mine)];
	const places = [...new Set([...left.keys(), ...right.keys()])];
	return places.flatMap((place) => {
		const [a, b] = [left.get(place), right.get(place)];
		return a === b ? [] : [{ place, theirs: a ?? 'nothing', mine: b ?? 'nothing' }];
	});
}

function readLeaves(value: unknown, path: string[] = []): Map<string, string> {
	if (value === null || typeof value !== 'object') {
		const text = value === null || value === '' ? 'empty' : String(value);
		return new Map([[path.join('.'), text]]);
	}
	const leaves = new Map<string, string>();
	for (const [key, part] of Object.entries(value)) {
		if (key === 'enteredBy') continue;
		const step = Array.isArray(value) ? String(Number(key) + 1) : key;
		for (const [place, text] of readLeaves(part, [...path, step])) leaves.set(place, text);
	}
	return leaves;
}

import { nameDraftPlace } from './name-draft-place';
import type { ProtocolDraft } from './protocol-draft';

export type DraftDifference = { path: string; place: string; theirs: string; mine: string };

/** Every single value in which two drafts differ, with its place in words. */
export function listDraftDifferences(
	theirs: ProtocolDraft,
	mine: ProtocolDraft
): DraftDifference[] {
	const [left, right] = [readLeaves(theirs), readLeaves(mine)];
	const paths = [...new Set([...left.keys(), ...right.keys()])];
	return paths.flatMap((path) => {
		const [a, b] = [left.get(path), right.get(path)];
		if (a === b) return [];
		const place = nameDraftPlace(b === undefined ? theirs : mine, path.split('\n'));
		return [{ path, place, theirs: a ?? 'nothing', mine: b ?? 'nothing' }];
	});
}

function readLeaves(value: unknown, path: string[] = []): Map<string, string> {
	if (value === null || typeof value !== 'object') {
		const text = value === null || value === '' ? 'empty' : String(value);
		return new Map([[path.join('\n'), text]]);
	}
	const leaves = new Map<string, string>();
	for (const [key, part] of Object.entries(value)) {
		if (key === 'enteredBy') continue;
		for (const [place, text] of readLeaves(part, [...path, key])) leaves.set(place, text);
	}
	return leaves;
}

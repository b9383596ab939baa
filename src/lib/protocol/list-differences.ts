import { describeProtocol } from './describe-protocol';
import type { ProtocolLine, Reader } from './protocol-line';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import { isReadable } from './readable-leaves';
import { nameLeaf, readLeaves } from './read-leaves';

export type Difference = {
	/** Part and line of the readable protocol, or the path of a value that has no line. */
	key: string;
	/** Part and line, such as 'Visits, Day 3'. */
	place: string;
	/** Null where the line is new. */
	before: string | null;
	/** Null where the line is gone. */
	after: string | null;
	/** Paths of the values that changed and that this entry tells of. */
	paths: string[];
};

/**
 * What changed from one version to another, in the words of the readable protocol. A value whose
 * change no line tells is listed by its path with both values: nothing that may be read is silent.
 */
export function listDifferences(
	before: ProtocolContent,
	after: ProtocolContent,
	reader: Reader
): Difference[] {
	const changed = listChangedLeaves(before, after);
	const lines = listChangedLines(before, after, reader);
	const told = lines.map((line) => ({ ...line.difference, paths: changed.filter(line.tells) }));
	const all = new Set(told.flatMap(({ paths }) => paths));
	const [old, fresh] = [readLeaves(before), readLeaves(after)];
	const rest = changed
		.filter((path) => !all.has(path) && isReadable(path, reader))
		.map((path) => ({
			key: path,
			place: nameLeaf(path),
			before: old.get(path) ?? null,
			after: fresh.get(path) ?? null,
			paths: [path]
		}));
	return [...told, ...rest];
}

/** Paths of the values in which two documents differ. */
export function listChangedLeaves(before: unknown, after: unknown): string[] {
	const [old, fresh] = [readLeaves(before), readLeaves(after)];
	const paths = [...new Set([...fresh.keys(), ...old.keys()])];
	return paths.filter((path) => old.get(path) !== fresh.get(path));
}

type ChangedLine = {
	difference: Omit<Difference, 'paths'>;
	/** Whether this line tells of a value in every version that has it. */
	tells(path: string): boolean;
};

function listChangedLines(
	before: ProtocolContent,
	after: ProtocolContent,
	reader: Reader
): ChangedLine[] {
	const [old, fresh] = [readLines(before, reader), readLines(after, reader)];
	const [oldLeaves, freshLeaves] = [readLeaves(before), readLeaves(after)];
	const keys = [...new Set([...fresh.keys(), ...old.keys()])];
	return keys.flatMap((key): ChangedLine[] => {
		const [was, is] = [old.get(key), fresh.get(key)];
		const place = is?.place ?? was?.place ?? key;
		const isRenamed = was !== undefined && is !== undefined && was.place !== is.place;
		if (was?.text === is?.text && !isRenamed) return [];
		const show = (line: NamedLine | undefined) =>
			line ? (isRenamed ? `${line.term}: ${line.text}` : line.text) : null;
		return [
			{
				difference: { key, place, before: show(was), after: show(is) },
				tells: (path) =>
					(was?.tells.has(path) || is?.tells.has(path)) === true &&
					(!was || !oldLeaves.has(path) || was.tells.has(path)) &&
					(!is || !freshLeaves.has(path) || is.tells.has(path))
			}
		];
	});
}

type NamedLine = { term: string; text: string; place: string; tells: Set<string> };

/** Lines in words, by part and line; values without words are compared one by one instead. */
function readLines(content: ProtocolContent, reader: Reader): Map<string, NamedLine> {
	const parts = describeProtocol(content, reader);
	const inWords = parts.filter(({ key }) => key !== 'settings' && key !== 'further');
	return new Map(
		inWords.flatMap((part) =>
			part.lines.map((line) => [`${part.key}/${line.key}`, nameLine(part.title, line)])
		)
	);
}

function nameLine(title: string, { term, text, tells }: ProtocolLine): NamedLine {
	return { term, text, place: `${title}, ${term}`, tells: new Set(tells) };
}

import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import { splitAnchor } from './comment';
import { describeProtocol } from './describe-protocol';
import type { ProtocolPart, Reader } from './protocol-line';

export type CommentScope = 'rule' | 'all';

/** The words at a comment's place as a reader has them; null where the reader has no such place. */
export function readAnchor(
	content: ProtocolContent,
	anchor: string,
	reader: Reader
): { place: string; text: string } | null {
	return findAnchor(describeProtocol(content, reader), anchor);
}

export function findAnchor(parts: readonly ProtocolPart[], anchor: string) {
	const { partKey, lineKey } = splitAnchor(anchor);
	const part = parts.find(({ key }) => key === partKey);
	if (!part) return null;
	if (lineKey === null) {
		const text = part.lines.map((line) => `${line.term}: ${line.text}`).join('\n');
		return { place: part.title, text };
	}
	const line = part.lines.find(({ key }) => key === lineKey);
	return line ? { place: `${part.title}, ${line.term}`, text: line.text } : null;
}

/**
 * Whom a comment is for. Somebody who may read the rule writes for everybody only where everybody
 * reads the very same words; else for those who read what they read. Null where the writer has no
 * such place.
 */
export function findCommentScope(
	content: ProtocolContent,
	anchor: string,
	writer: Reader
): CommentScope | null {
	const own = readAnchor(content, anchor, writer);
	if (!own) return null;
	if (!writer.withRule) return 'all';
	const others = readAnchor(content, anchor, { withRule: false });
	return others?.text === own.text ? 'all' : 'rule';
}

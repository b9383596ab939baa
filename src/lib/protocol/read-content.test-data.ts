import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import type { ProtocolDraft } from './protocol-draft';
import { readContent } from './read-content';

/** The content of a draft that is finished. */
export function contentOf(draft: ProtocolDraft): ProtocolContent {
	const read = readContent(draft);
	if (!read.ok) throw new Error(read.faults.map(({ text }) => text).join('\n'));
	return read.content;
}

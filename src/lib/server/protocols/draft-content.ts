import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import { protocolDraftSchema, type ProtocolDraft } from '$lib/protocol/protocol-draft';

/**
 * A version without a hash keeps its forms in the column that holds the document once it is frozen.
 * Only these two functions know: nothing else reads the content of an unfrozen version.
 */
export function storeDraft(draft: ProtocolDraft): ProtocolContent {
	return draft as unknown as ProtocolContent;
}

/** @throws {Error} for the content of a frozen version */
export function loadDraftContent(content: ProtocolContent): ProtocolDraft {
	return protocolDraftSchema.parse(content);
}

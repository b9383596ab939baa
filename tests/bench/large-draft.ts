import { plainBlock } from '../../src/lib/protocol/empty-parts';
import { addArm } from '../../src/lib/protocol/edit/arms';
import { writeList } from '../../src/lib/protocol/edit/block-lists';
import { copyVisit } from '../../src/lib/protocol/edit/visits';
import type { ProtocolDraft } from '../../src/lib/protocol/protocol-draft';

/** A draft with 6 arms, 20 visits and 12 blocks in each: every arm has blocks of its own. */
export function enlargeDraft(start: ProtocolDraft): ProtocolDraft {
	let draft = start;
	while (draft.arms.length < 6) draft = addArm(draft);
	while (draft.visits.length < 20) draft = copyVisit(draft, 1);
	const blocks = Array.from({ length: 12 }, (_, index) =>
		plainBlock(index % 3 === 0 ? 'probe' : 'practice', 20)
	);
	draft.visits.forEach((_, visit) => {
		for (const { key } of draft.arms) draft = writeList(draft, { visit, arm: key }, [...blocks]);
	});
	return draft;
}

import type { BlockDraft } from '../draft-parts';
import type { BlockRef } from '../edit/block-lists';
import { feedbackWords } from '../ladder/feedback-words';
import type { ProtocolDraft } from '../protocol-draft';
import { purposeWords } from '../purpose-words';
import { visitName } from '../visit-name';
import { everyArm, numberColumns } from './block-columns';

export type BlockRow = { id: string; ref: BlockRef; cells: Record<string, string> };

/** Every block of a draft as a row of texts: the list of every arm first, then those of single arms. */
export function listBlockRows({
	arms,
	visits
}: Pick<ProtocolDraft, 'arms' | 'visits'>): BlockRow[] {
	return visits.flatMap((visit, index) => {
		const name = visitName(visit, index);
		const own = arms.flatMap(({ key, name: armName }) =>
			(visit.armBlocks[key] ?? []).map((block, at) =>
				writeRow(block, { visit: index, arm: key, block: at }, armName || key, name)
			)
		);
		const shared = visit.blocks.map((block, at) =>
			writeRow(block, { visit: index, arm: null, block: at }, everyArm, name)
		);
		return [...shared, ...own];
	});
}

function writeRow(block: BlockDraft, ref: BlockRef, arm: string, visit: string): BlockRow {
	const id = `${ref.visit}:${ref.arm ?? ''}:${ref.block}`;
	const show = (value: number | null | undefined) => (value == null ? '' : String(value));
	const numbers = numberColumns.map(({ key }) => [key, show(block[key])]);
	const placed = (block.region?.center ?? []).flatMap((value, at) => [
		[`center${at}`, show(value)],
		[`halfWidth${at}`, show(block.region?.halfWidth[at])]
	]);
	const cells: Record<string, string> = {
		...{ arm, visit, block: String(ref.block + 1), purpose: purposeWords[block.purpose].label },
		...Object.fromEntries(numbers),
		...{ instruction: block.instruction },
		...{ feedback: block.feedback ? feedbackWords[block.feedback] : '' },
		...{ shiftFrom: show(block.shift?.from), shiftTo: show(block.shift?.to) },
		...Object.fromEntries(placed)
	};
	return { id, ref, cells };
}

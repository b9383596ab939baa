import { changeBlocks } from '../edit/blocks';
import type { ProtocolDraft } from '../protocol-draft';
import type { BlockColumn } from './block-columns';
import type { BlockRow } from './list-block-rows';
import { readBlockCells } from './read-block-cells';

type Change = { rows: readonly BlockRow[]; key: string; text: string };

/** The draft with one text written into a column of these rows, or why it cannot be. */
export function changeBlockRows(
	draft: ProtocolDraft,
	columns: readonly BlockColumn[],
	{ rows, key, text }: Change
): { ok: true; draft: ProtocolDraft } | { ok: false; why: string } {
	let next = draft;
	for (const { cells, ref } of rows) {
		const reading = readBlockCells({ ...cells, [key]: text }, { draft, columns });
		if (!reading.ok) {
			const fault = reading.faults.find(({ column }) => column === key) ?? reading.faults[0];
			return { ok: false, why: explain(fault) };
		}
		next = changeBlocks(next, [ref], reading.read.block);
	}
	return { ok: true, draft: next };
}

function explain(fault: { message: string; suggestion: string | null } | undefined): string {
	if (!fault) return 'it cannot be read';
	return fault.suggestion === null
		? fault.message
		: `${fault.message}; was ${fault.suggestion} meant?`;
}

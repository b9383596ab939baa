import type { TextRow } from '../../ui/table-text';
import { mostBlocks, writeList, type ListPlace } from '../edit/block-lists';
import { isSameList } from '../edit/blocks';
import type { ProtocolDraft } from '../protocol-draft';
import { visitName } from '../visit-name';
import type { BlockColumn } from './block-columns';
import { readBlockCells, type ColumnFault, type ReadBlock } from './read-block-cells';

export type CheckedRow = TextRow<string> & { faults: ColumnFault[] };
export type CheckedRows = {
	rows: CheckedRow[];
	/** The lists that would be replaced; null while any row is wrong. */
	lists: { place: ListPlace; blocks: ReadBlock['block'][] }[] | null;
};

type Context = { draft: Pick<ProtocolDraft, 'arms' | 'visits'>; columns: readonly BlockColumn[] };

/**
 * Pasted rows as whole lists of blocks: each visit and arm that is named gets exactly the blocks of its
 * rows, in the order of their numbers, or of the rows where there are none.
 */
export function checkBlockRows(rows: readonly TextRow<string>[], context: Context): CheckedRows {
	const readings = rows.map((row) => ({ row, reading: readBlockCells(row.cells, context) }));
	const groups: { place: ListPlace; members: { at: number; read: ReadBlock }[] }[] = [];
	readings.forEach(({ reading }, at) => {
		if (!reading.ok) return;
		const { read } = reading;
		const group = groups.find(({ place }) => isSameList(place, read.place));
		if (group) group.members.push({ at, read });
		else groups.push({ place: read.place, members: [{ at, read }] });
	});
	const crossed = new Map<number, ColumnFault>();
	for (const group of groups) findGroupFaults(group, context.draft, crossed);
	const checked = readings.map(({ row, reading }, at) => {
		const more = crossed.get(at);
		return { ...row, faults: [...(reading.ok ? [] : reading.faults), ...(more ? [more] : [])] };
	});
	const isGood = checked.every(({ faults }) => faults.length === 0);
	return { rows: checked, lists: isGood ? groups.map(toList) : null };
}

/** The draft with these lists in place of those of the same visits and arms. */
export function applyLists(
	draft: ProtocolDraft,
	lists: NonNullable<CheckedRows['lists']>
): ProtocolDraft {
	return lists.reduce((next, { place, blocks }) => writeList(next, place, blocks), draft);
}

type Group = { place: ListPlace; members: { at: number; read: ReadBlock }[] };

function findGroupFaults(
	{ place, members }: Group,
	{ visits }: Context['draft'],
	found: Map<number, ColumnFault>
): void {
	const visit = visits[place.visit];
	const name = visit ? visitName(visit, place.visit) : '';
	const seen = new Set<number>();
	members.forEach(({ at, read: { number } }, index) => {
		if (index >= mostBlocks) {
			const message = `${name} gets more than ${mostBlocks} blocks`;
			found.set(at, { column: 'visit', message, suggestion: null });
		} else if (number !== null && seen.has(number)) {
			const message = `${name} has a block ${number} already, further up`;
			found.set(at, { column: 'block', message, suggestion: null });
		}
		if (number !== null) seen.add(number);
	});
}

function toList({ place, members }: Group) {
	const sorted = members.toSorted(
		(a, b) => (a.read.number ?? a.at + 1e6) - (b.read.number ?? b.at + 1e6) || a.at - b.at
	);
	return { place, blocks: sorted.map(({ read }) => read.block) };
}

import type { BlockDraft } from '../draft-parts';
import type { ProtocolDraft } from '../protocol-draft';
import { mostBlocks, readList, writeList, type BlockRef, type ListPlace } from './block-lists';

/**
 * What can be done with blocks. Each gives another draft and leaves the old one as it is; the same
 * draft comes back where there is nothing to do or a visit would get more blocks than it may hold.
 */

export type InsertPlace = ListPlace & { index: number };

export function insertBlocks(
	draft: ProtocolDraft,
	{ index, ...place }: InsertPlace,
	blocks: readonly BlockDraft[]
): ProtocolDraft {
	const list = readList(draft, place);
	if (blocks.length === 0 || !draft.visits[place.visit]) return draft;
	if (list.length + blocks.length > mostBlocks) return draft;
	return writeList(draft, place, list.toSpliced(index, 0, ...blocks));
}

export function removeBlocks(draft: ProtocolDraft, refs: readonly BlockRef[]): ProtocolDraft {
	return groupByList(refs).reduce((next, { place, indexes }) => {
		const list = readList(next, place);
		const left = list.filter((_, index) => !indexes.has(index));
		return left.length === list.length ? next : writeList(next, place, left);
	}, draft);
}

export function changeBlocks(
	draft: ProtocolDraft,
	refs: readonly BlockRef[],
	change: Partial<BlockDraft>
): ProtocolDraft {
	return groupByList(refs).reduce((next, { place, indexes }) => {
		const list = readList(next, place);
		const blocks = list.map((block, index) =>
			indexes.has(index) ? { ...block, ...change } : block
		);
		return indexes.size === 0 ? next : writeList(next, place, blocks);
	}, draft);
}

/** Takes blocks out, in reading order, and puts them in together; `to.index` counts before the move. */
export function moveBlocks(
	draft: ProtocolDraft,
	refs: readonly BlockRef[],
	to: InsertPlace
): ProtocolDraft {
	const sorted = sortRefs(draft, refs);
	const blocks = readBlocks(draft, sorted);
	if (blocks.length === 0) return draft;
	const before = sorted.filter((ref) => isSameList(ref, to) && ref.block < to.index).length;
	const isStill = sorted.every(
		(ref, at) => isSameList(ref, to) && ref.block === to.index - before + at
	);
	if (isStill) return draft;
	const taken = removeBlocks(draft, sorted);
	const moved = insertBlocks(taken, { ...to, index: to.index - before }, blocks);
	return moved === taken ? draft : moved;
}

/** A copy of each block right behind the last of them. */
export function duplicateBlocks(draft: ProtocolDraft, refs: readonly BlockRef[]): ProtocolDraft {
	const sorted = sortRefs(draft, refs);
	const last = sorted.at(-1);
	if (!last) return draft;
	return insertBlocks(draft, { ...last, index: last.block + 1 }, readBlocks(draft, sorted));
}

/** The blocks themselves, in reading order: by visit, by arm, by place. */
export function readBlocks(draft: ProtocolDraft, refs: readonly BlockRef[]): BlockDraft[] {
	return sortRefs(draft, refs).flatMap((ref) => readList(draft, ref)[ref.block] ?? []);
}

export function isSameList(a: ListPlace, b: ListPlace): boolean {
	return a.visit === b.visit && a.arm === b.arm;
}

function sortRefs({ arms }: ProtocolDraft, refs: readonly BlockRef[]): BlockRef[] {
	const rank = ({ arm }: BlockRef) => arms.findIndex(({ key }) => key === arm);
	return [...refs].sort((a, b) => a.visit - b.visit || rank(a) - rank(b) || a.block - b.block);
}

function groupByList(refs: readonly BlockRef[]) {
	const groups: { place: ListPlace; indexes: Set<number> }[] = [];
	for (const { visit, arm, block } of refs) {
		const found = groups.find(({ place }) => isSameList(place, { visit, arm }));
		if (found) found.indexes.add(block);
		else groups.push({ place: { visit, arm }, indexes: new Set([block]) });
	}
	return groups;
}

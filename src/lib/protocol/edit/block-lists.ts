import type { BlockDraft, VisitDraft } from '../draft-parts';
import type { ProtocolDraft } from '../protocol-draft';

/** A list of blocks: of one visit, and of one arm or (null) of every arm without a list of its own. */
export type ListPlace = { visit: number; arm: string | null };
export type BlockRef = ListPlace & { block: number };

export const mostBlocks = 40;
export const mostVisits = 40;
export const mostArms = 6;

/** The blocks that stand at a place; those of every arm where the arm has none of its own. */
export function readList(
	{ visits }: Pick<ProtocolDraft, 'visits'>,
	{ visit, arm }: ListPlace
): readonly BlockDraft[] {
	const found = visits[visit];
	if (!found) return [];
	return (arm === null ? undefined : found.armBlocks[arm]) ?? found.blocks;
}

/** Whether an arm has blocks of its own in a visit. */
export function hasOwnList(visit: VisitDraft | undefined, arm: string | null): boolean {
	return arm !== null && visit?.armBlocks[arm] !== undefined;
}

/** Another list at a place; an arm named here has its own from then on. */
export function writeList(
	draft: ProtocolDraft,
	{ visit, arm }: ListPlace,
	blocks: BlockDraft[]
): ProtocolDraft {
	return changeVisitAt(draft, visit, (old) =>
		arm === null ? { ...old, blocks } : { ...old, armBlocks: { ...old.armBlocks, [arm]: blocks } }
	);
}

/** The arm runs the blocks of every arm again. */
export function dropOwnList(draft: ProtocolDraft, { visit, arm }: ListPlace): ProtocolDraft {
	if (arm === null || !hasOwnList(draft.visits[visit], arm)) return draft;
	return changeVisitAt(draft, visit, (old) => ({ ...old, armBlocks: without(old.armBlocks, arm) }));
}

/** The blocks of this arm become those of every arm, and no arm of this visit has its own any more. */
export function spreadList(draft: ProtocolDraft, place: ListPlace): ProtocolDraft {
	const blocks = [...readList(draft, place)];
	return changeVisitAt(draft, place.visit, (old) => ({ ...old, blocks, armBlocks: {} }));
}

export function changeVisitAt(
	draft: ProtocolDraft,
	index: number,
	change: (visit: VisitDraft) => VisitDraft
): ProtocolDraft {
	const old = draft.visits[index];
	return old ? { ...draft, visits: draft.visits.with(index, change(old)) } : draft;
}

export function without<Value>(record: Record<string, Value>, key: string): Record<string, Value> {
	return Object.fromEntries(Object.entries(record).filter(([name]) => name !== key));
}

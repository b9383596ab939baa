import type { VisitPlan } from '$lib/protocol/protocol-content';

export type Slot = {
	visitNumber: number;
	blockNumber: number;
	purpose: VisitPlan['blocks'][number]['purpose'];
	trials: number;
	/** 0 for the first block of the visit. */
	indexInVisit: number;
	blocksInVisit: number;
};

/** Every block place of a protocol in the order in which it is run. */
export function listSlots(visits: readonly VisitPlan[]): Slot[] {
	const inOrder = [...visits].sort((a, b) => a.number - b.number);
	return inOrder.flatMap((visit) =>
		[...visit.blocks]
			.sort((a, b) => a.number - b.number)
			.map((block, indexInVisit) => ({
				visitNumber: visit.number,
				blockNumber: block.number,
				purpose: block.purpose,
				trials: block.trials,
				indexInVisit,
				blocksInVisit: visit.blocks.length
			}))
	);
}

export const slotKey = (slot: { visitNumber: number; blockNumber: number }) =>
	`${slot.visitNumber}.${slot.blockNumber}`;

export type Progress = {
	decided: ReadonlySet<string>;
	stored: ReadonlySet<string>;
	/** Visits that will not take place any more: missed, or passed without data. */
	isOver: (visitNumber: number) => boolean;
	/** Whether the visit's ready hour has come: it is decided even when data are late. */
	isDue: (visitNumber: number) => boolean;
	isAllocated: boolean;
};

/**
 * The next place to decide, or null when nothing can be decided now. A place is decided once the
 * block before it is stored; the first place of a visit also when its ready hour has come.
 * Everything after baseline waits for allocation.
 */
export function findNextSlot(slots: readonly Slot[], progress: Progress): Slot | null {
	const index = slots.findIndex((slot) => !progress.decided.has(slotKey(slot)));
	const next = slots[index];
	if (!next) return null;
	if (next.purpose !== 'baseline' && !progress.isAllocated) return null;
	const before = slots[index - 1];
	if (progress.stored.has(slotKey(next))) return next;
	if (before && progress.stored.has(slotKey(before))) return next;
	const isNewVisit = before === undefined || before.visitNumber !== next.visitNumber;
	if (!isNewVisit) return progress.isOver(next.visitNumber) ? next : null;
	return progress.isDue(next.visitNumber) ? next : null;
}

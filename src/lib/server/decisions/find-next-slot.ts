import type { BlockPlan } from '$scheduler/protocol/block-plan';
import { blocksOfArm, type VisitPlan } from '$scheduler/protocol/visit-plan';

export type Slot = {
	visitNumber: number;
	blockNumber: number;
	purpose: BlockPlan['purpose'];
	trials: number;
	/** The block as the protocol lists it for the person's arm. */
	plan: BlockPlan;
	/** 0 for the first block of the visit. */
	indexInVisit: number;
	blocksInVisit: number;
};

/** Every block place of an arm in the order in which it is run; rests have nothing to decide. */
export function listSlots(visits: readonly VisitPlan[], arm: string | null): Slot[] {
	const inOrder = [...visits].sort((a, b) => a.number - b.number);
	return inOrder.flatMap((visit) => {
		const blocks = blocksOfArm(visit, arm).filter(({ purpose }) => purpose !== 'rest');
		return blocks
			.sort((a, b) => a.number - b.number)
			.map((plan, indexInVisit) => ({
				visitNumber: visit.number,
				blockNumber: plan.number,
				purpose: plan.purpose,
				trials: plan.trials,
				plan,
				indexInVisit,
				blocksInVisit: blocks.length
			}));
	});
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

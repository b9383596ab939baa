import { describe, expect, it } from 'vitest';
import type { VisitPlan } from '$scheduler/protocol/visit-plan';
import { findNextSlot, listSlots, slotKey, type Progress } from './find-next-slot';

const visit = (
	number: number,
	purpose: 'baseline' | 'adaptive',
	blockCount: number
): VisitPlan => ({
	number,
	label: `visit ${number}`,
	kind: purpose === 'baseline' ? 'baseline' : 'practice',
	minutes: 30,
	setupMinutes: 0,
	cleanupMinutes: 0,
	gapBefore: null,
	blocks: Array.from({ length: blockCount }, (_, index) => ({
		number: index + 1,
		purpose,
		trials: 60
	}))
});
const slots = listSlots(
	[visit(2, 'adaptive', 2), visit(1, 'baseline', 1), visit(3, 'adaptive', 1)],
	null
);

const progress = (more: Partial<Progress> = {}): Progress => ({
	decided: new Set(),
	stored: new Set(),
	isDue: () => false,
	isOver: () => false,
	isAllocated: false,
	...more
});
const next = (more: Partial<Progress>) => {
	const found = findNextSlot(slots, progress(more));
	return found && slotKey(found);
};

describe('findNextSlot', () => {
	it('runs places in the order of visits and blocks', () => {
		expect(slots.map(slotKey)).toEqual(['1.1', '2.1', '2.2', '3.1']);
	});

	it('takes the list of the person’s arm and passes over rests', () => {
		const own = visit(1, 'adaptive', 3);
		const rest = { number: 2, purpose: 'rest', trials: 0, restMinutes: 5 } as const;
		const [first, , last] = own.blocks;
		if (!first || !last) throw new Error('three blocks');
		const plan = { ...own, armBlocks: { fixed: [first, rest, last] } };
		expect(listSlots([plan], 'fixed').map(slotKey)).toEqual(['1.1', '1.3']);
		expect(listSlots([plan], 'fixed').map(({ indexInVisit }) => indexInVisit)).toEqual([0, 1]);
		expect(listSlots([plan], 'adaptive').map(slotKey)).toEqual(['1.1', '1.2', '1.3']);
		expect(listSlots([plan], null)).toHaveLength(3);
	});

	it('waits for the ready hour of the first visit', () => {
		expect(next({})).toBeNull();
		expect(next({ isDue: (number) => number === 1 })).toBe('1.1');
	});

	it('waits for allocation after baseline', () => {
		const after = { decided: new Set(['1.1']), stored: new Set(['1.1']) };
		expect(next(after)).toBeNull();
		expect(next({ ...after, isAllocated: true })).toBe('2.1');
	});

	it('decides the next visit as soon as the data before it are in', () => {
		const state = {
			decided: new Set(['1.1', '2.1', '2.2']),
			stored: new Set(['1.1', '2.1', '2.2'])
		};
		expect(next({ ...state, isAllocated: true })).toBe('3.1');
	});

	it('decides a visit at its ready hour when data are late', () => {
		const state = { decided: new Set(['1.1']), stored: new Set<string>(), isAllocated: true };
		expect(next({ ...state, isDue: (number) => number === 2 })).toBe('2.1');
	});

	it('waits inside a visit for the block before, until the visit is over', () => {
		const state = { decided: new Set(['1.1', '2.1']), stored: new Set(['1.1']), isAllocated: true };
		expect(next({ ...state, isDue: () => true })).toBeNull();
		expect(next({ ...state, isOver: (number) => number === 2 })).toBe('2.2');
	});

	it('has nothing to decide when every place is decided', () => {
		expect(next({ decided: new Set(slots.map(slotKey)), isAllocated: true })).toBeNull();
	});
});

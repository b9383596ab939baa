import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { EditHistory } from '../../ui/edit-history';
import { plainBlock } from '../empty-parts';
import { createPatternDraft } from '../patterns';
import { protocolDraftSchema, type ProtocolDraft } from '../protocol-draft';
import { addArm, changeArm, copyArm, moveArm, removeArm } from './arms';
import { dropOwnList, readList, spreadList, type BlockRef } from './block-lists';
import { changeBlocks, duplicateBlocks, insertBlocks, moveBlocks, removeBlocks } from './blocks';
import { addVisit, changeGap, changeVisit, copyVisit, moveVisit, removeVisit } from './visits';

type Edit = (draft: ProtocolDraft) => ProtocolDraft;
type Numbers = { a: number; b: number; c: number; d: number; isOwn: boolean };

const numbers = fc.record({
	a: fc.nat({ max: 12 }),
	b: fc.nat({ max: 12 }),
	c: fc.nat({ max: 12 }),
	d: fc.nat({ max: 12 }),
	isOwn: fc.boolean()
});

/** Every act of the editor, with places that exist in the draft at hand. */
const acts: ((draft: ProtocolDraft, at: Numbers) => ProtocolDraft)[] = [
	(draft, at) =>
		insertBlocks(draft, { ...list(draft, at), index: at.c }, [plainBlock('probe', 40)]),
	(draft, at) => removeBlocks(draft, [ref(draft, at)]),
	(draft, at) => changeBlocks(draft, [ref(draft, at)], { trials: at.d * 10, feedback: 'hidden' }),
	(draft, at) => duplicateBlocks(draft, [ref(draft, at)]),
	(draft, at) =>
		moveBlocks(draft, [ref(draft, at)], {
			...list(draft, { ...at, a: at.d, isOwn: !at.isOwn }),
			index: at.c
		}),
	(draft, at) => dropOwnList(draft, list(draft, { ...at, isOwn: true })),
	(draft, at) => spreadList(draft, list(draft, at)),
	(draft, at) => addVisit(draft, at.a % draft.visits.length),
	(draft, at) => copyVisit(draft, at.a % draft.visits.length),
	(draft, at) => moveVisit(draft, at.a % draft.visits.length, at.isOwn ? 1 : -1),
	(draft, at) => removeVisit(draft, at.a % draft.visits.length),
	(draft, at) => changeVisit(draft, at.a % draft.visits.length, { minutes: at.b * 5 }),
	(draft, at) => changeGap(draft, at.a % draft.visits.length, { targetHours: at.b + 20 }),
	(draft) => addArm(draft),
	(draft, at) => copyArm(draft, at.a % draft.arms.length),
	(draft, at) => moveArm(draft, at.a % draft.arms.length, at.isOwn ? 1 : -1),
	(draft, at) => removeArm(draft, at.a % draft.arms.length),
	(draft, at) => changeArm(draft, at.a % draft.arms.length, { rule: at.isOwn ? 'yoked' : 'fixed' })
];

function list(draft: ProtocolDraft, { a, b, isOwn }: Numbers) {
	const arm = draft.arms[b % draft.arms.length]?.key ?? null;
	return { visit: a % draft.visits.length, arm: isOwn ? arm : null };
}

function ref(draft: ProtocolDraft, at: Numbers): BlockRef {
	const place = list(draft, at);
	return { ...place, block: at.c % Math.max(1, readList(draft, place).length) };
}

const edits = fc
	.array(fc.tuple(fc.nat({ max: acts.length - 1 }), numbers), { minLength: 20, maxLength: 20 })
	.map((chosen) =>
		chosen.map(
			([act, at]): Edit =>
				(draft) =>
					acts[act]?.(draft, at) ?? draft
		)
	);

describe('editing a protocol', () => {
	it('gives the start again when 20 random edits are undone, and the end when they are redone', () => {
		fc.assert(
			fc.property(edits, (chosen) => {
				const start = createPatternDraft('two-arms');
				const text = JSON.stringify(start);
				const history = new EditHistory(start);
				for (const edit of chosen) {
					history.record(edit(history.state), { label: 'an edit', atMs: 0 });
				}
				const end = history.state;
				while (history.undo()) expect(history.state).not.toBe(end);
				expect(history.state).toBe(start);
				expect(JSON.stringify(start)).toBe(text);
				while (history.redo());
				expect(history.state).toBe(end);
			}),
			{ numRuns: 200 }
		);
	});

	it('never leaves what the draft’s own rules refuse, nor blocks of an arm that is gone', () => {
		fc.assert(
			fc.property(edits, (chosen) => {
				const draft = chosen.reduce((now, edit) => edit(now), createPatternDraft('two-arms'));
				expect(protocolDraftSchema.safeParse(draft).success).toBe(true);
				const keys = draft.arms.map(({ key }) => key);
				expect(new Set(keys).size).toBe(keys.length);
				for (const { armBlocks } of draft.visits) {
					expect(keys).toEqual(expect.arrayContaining(Object.keys(armBlocks)));
				}
				for (const { rule, master } of draft.arms) {
					if (master !== null) expect(keys).toContain(master);
					if (rule !== 'yoked') expect(master).toBeNull();
				}
			}),
			{ numRuns: 100 }
		);
	});

	it('moves blocks to where the gap was when they were picked up', () => {
		const start = insertBlocks(createPatternDraft('two-arms'), { visit: 1, arm: null, index: 0 }, [
			plainBlock('probe', 40),
			plainBlock('washout', 20)
		]);
		const at = (block: number): BlockRef => ({ visit: 1, arm: null, block });
		const purposes = (draft: ProtocolDraft) =>
			readList(draft, { visit: 1, arm: null }).map(({ purpose }) => purpose);
		expect(purposes(start)).toEqual([
			...['probe', 'washout', 'adaptive', 'adaptive', 'adaptive', 'adaptive']
		]);
		const moved = moveBlocks(start, [at(0), at(1)], { visit: 1, arm: null, index: 3 });
		expect(purposes(moved)).toEqual([
			...['adaptive', 'probe', 'washout', 'adaptive', 'adaptive', 'adaptive']
		]);
		expect(moveBlocks(start, [at(1)], { visit: 1, arm: null, index: 1 })).toBe(start);
		expect(moveBlocks(start, [at(1)], { visit: 1, arm: null, index: 2 })).toBe(start);
	});

	it('gives an arm a list of its own on its first edit, and leaves the others', () => {
		const start = createPatternDraft('two-arms');
		const fixed = { visit: 1, arm: 'fixed' };
		const changed = changeBlocks(start, [{ ...fixed, block: 0 }], { purpose: 'probe' });
		expect(readList(changed, fixed).map(({ purpose }) => purpose)).toEqual([
			...['probe', 'adaptive', 'adaptive', 'adaptive']
		]);
		expect(readList(changed, { visit: 1, arm: 'adaptive' })).toBe(start.visits[1]?.blocks);
		expect(dropOwnList(changed, fixed)).toEqual(start);
	});

	it('takes no more blocks, visits or arms than a protocol may hold', () => {
		const start = createPatternDraft('two-arms');
		const many = Array.from({ length: 37 }, () => plainBlock('practice', 10));
		expect(insertBlocks(start, { visit: 1, arm: null, index: 0 }, many)).toBe(start);
		let full = start;
		for (let count = 0; count < 50; count += 1) full = addArm(copyVisit(full, 1));
		expect([full.visits.length, full.arms.length]).toEqual([40, 6]);
	});
});

import { describe, expect, it } from 'vitest';
import { changeBlocks } from './edit/blocks';
import { changeGap, changeVisit, copyVisit } from './edit/visits';
import { listDraftDifferences } from './list-draft-differences';
import { mergeDrafts } from './merge-drafts';
import { createPatternDraft } from './patterns';

const base = createPatternDraft('two-arms');
const at = { visit: 2, arm: null, block: 1 };

describe('two people in one draft', () => {
	it('keep what each changed where they do not meet', () => {
		const theirs = changeGap(base, 3, { targetHours: 25 });
		const mine = changeBlocks(base, [at], { trials: 40 });
		const { draft, clashes } = mergeDrafts({ base, theirs, mine });
		expect(clashes).toBe(0);
		expect(draft).toEqual(changeGap(mine, 3, { targetHours: 25 }));
	});

	it('keep mine where both changed the same value, and say so', () => {
		const theirs = changeVisit(changeBlocks(base, [at], { trials: 50 }), 0, { minutes: 30 });
		const mine = changeBlocks(base, [at], { trials: 40 });
		const { draft, clashes } = mergeDrafts({ base, theirs, mine });
		expect(clashes).toBe(1);
		expect(draft).toEqual(changeVisit(mine, 0, { minutes: 30 }));
	});

	it('do not mix two lists of different length', () => {
		const theirs = copyVisit(base, 1);
		const mine = changeBlocks(base, [at], { trials: 40 });
		expect(mergeDrafts({ base, theirs, mine })).toEqual({ draft: mine, clashes: 1 });
	});

	it('read where they differ in words', () => {
		const theirs = changeGap(base, 3, { targetHours: 25 });
		const mine = changeBlocks(base, [{ ...at, arm: 'fixed' }], { trials: 40 });
		const found = listDraftDifferences(theirs, mine);
		expect(found).toContainEqual({
			path: 'visits\n3\ngapBefore\ntargetHours',
			place: 'Day 3, wanted gap, h',
			theirs: '25',
			mine: '24'
		});
		expect(found.find(({ mine: value }) => value === '40')?.place).toBe(
			'Day 2, of Fixed, block 2, trials'
		);
	});
});

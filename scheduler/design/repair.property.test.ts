import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { checkDesign } from './check-design.ts';
import type { Design } from './design.ts';
import { block, designWith, faultyDesign, visit } from './designs.test-data.ts';
import { repairDesign } from './repair.ts';
import type { DesignPath } from './repair.ts';

const purposes = [
	'practice',
	'adaptive',
	'region',
	'shift',
	'probe',
	'washout',
	'retention'
] as const;

/** Blocks as somebody might leave them in the middle of an edit. */
const blocks = fc.array(
	fc
		.record({
			purpose: fc.constantFrom(...purposes, 'baseline' as const, 'rest' as const),
			trials: fc.integer({ min: 1, max: 150 }),
			restBetweenTrialsSeconds: fc.constantFrom(null, 0, 2, 5),
			restAfterMinutes: fc.constantFrom(null, 1, 3),
			warmUpTrials: fc.constantFrom(null, 0, 5),
			instruction: fc.constantFrom('', '1', '2'),
			feedback: fc.constantFrom(null, 'shown' as const, 'hidden' as const),
			to: fc.constantFrom(0, 0.2)
		})
		.map(({ purpose, trials, to, ...settings }) =>
			purpose === 'rest'
				? block('rest', 0, { restMinutes: trials / 10 })
				: block(purpose, trials, { ...settings, shift: to > 0 ? { from: 0, to } : null })
		),
	{ minLength: 1, maxLength: 5 }
);

const gap = fc
	.tuple(
		fc.integer({ min: 1, max: 100 }),
		fc.integer({ min: 0, max: 60 }),
		fc.integer({ max: 3, min: 0 })
	)
	.map(([minHours, more, nightsBetween]) => ({
		...{ minHours, targetHours: minHours, maxHours: minHours + more, nightsBetween }
	}));

const designs: fc.Arbitrary<Design> = fc
	.record({
		lists: fc.array(fc.tuple(blocks, blocks, fc.boolean()), { minLength: 1, maxLength: 4 }),
		gaps: fc.array(gap, { minLength: 4, maxLength: 4 }),
		rules: fc.tuple(
			fc.constantFrom('adaptive' as const, 'fixed' as const),
			fc.constantFrom('fixed' as const, 'adaptive' as const)
		),
		q1: fc.constantFrom(0.5, 0.9, 0.99),
		pauses: fc.integer({ min: 0, max: 2 }),
		dayMeaning: fc.constantFrom('elapsed-hours', 'clock-time'),
		minutes: fc.integer({ min: 5, max: 120 })
	})
	.map(({ lists, gaps, rules, q1, pauses, dayMeaning, minutes }) => {
		const later = lists.map(([common, own, isApart], i) => ({
			...visit(`Day ${i + 1}`, 'practice', common, gaps[i]),
			minutes,
			armBlocks: isApart ? { b: own } : {}
		}));
		const first = { ...visit('Baseline', 'baseline', [block('baseline', 60)]), gapBefore: null };
		return designWith(
			[['arms'], rules.map((rule, i) => ({ key: 'ab'[i], name: '', rule, master: null }))],
			[['visits'], [first, ...later]],
			[['policy'], { band: { q1 } }],
			[['booking', 'pauses', 'count'], pauses],
			[['booking', 'dayMeaning'], dayMeaning]
		);
	});

const find = (design: Design, key: string) =>
	checkDesign(design).some((found) => found.key === key);

describe('a repair', { timeout: 60_000 }, () => {
	it('takes its own finding away, whatever else is wrong', () => {
		fc.assert(
			fc.property(designs, (design) => {
				for (const { key, repair } of checkDesign(design)) {
					if (repair) expect([key, find(repairDesign(design, repair), key)]).toEqual([key, false]);
				}
			}),
			{ numRuns: 25 }
		);
	});

	it('is offered for each of the twelve faults and takes it away', () => {
		const design = faultyDesign();
		for (const { key, repair } of checkDesign(design)) {
			expect([key, repair !== undefined]).toEqual([key, true]);
			if (repair) expect([key, find(repairDesign(design, repair), key)]).toEqual([key, false]);
		}
	});

	it('leaves the design that it is given as it is', () => {
		const design = faultyDesign();
		const before = JSON.stringify(design);
		for (const { repair } of checkDesign(design)) if (repair) repairDesign(design, repair);
		expect(JSON.stringify(design)).toBe(before);
	});

	it('is plain data', () => {
		for (const { repair } of checkDesign(faultyDesign())) {
			expect(JSON.parse(JSON.stringify(repair))).toEqual(repair);
		}
	});

	it('mends the faulty protocol within a few presses of a key, one after another', () => {
		let design = faultyDesign();
		let presses = 0;
		for (let found = checkDesign(design); found[0]?.repair; found = checkDesign(design)) {
			design = repairDesign(design, found[0].repair);
			if (++presses > 60) break;
		}
		expect(checkDesign(design)).toEqual([]);
	});

	it('reaches a place that the design does not hold yet', () => {
		const path: DesignPath = ['policy', 'shift', 'rule', 'firstStepSd'];
		const repair = { label: '', operations: [{ kind: 'set-value', path, value: 1 } as const] };
		expect(repairDesign(faultyDesign(), repair).policy).toMatchObject({
			shift: { rule: { firstStepSd: 1 } }
		});
	});
});

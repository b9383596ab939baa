import fc from 'fast-check';
import { expect, it } from 'vitest';
import { listArmBurdens } from './burden.ts';
import { block, designWith, soundDesign, visit } from './designs.test-data.ts';

it('sums set-up, block minutes and clean-up of every visit to the hours of the rig', () => {
	const blocks = fc.array(
		fc.record({
			trials: fc.integer({ min: 0, max: 200 }),
			seconds: fc.integer({ min: 0, max: 20 }),
			after: fc.integer({ min: 0, max: 10 }),
			rest: fc.integer({ min: 0, max: 15 })
		}),
		{ minLength: 1, maxLength: 6 }
	);
	const days = fc.array(fc.record({ blocks, setup: fc.nat(60), cleanup: fc.nat(60) }), {
		...{ minLength: 1, maxLength: 8 }
	});
	fc.assert(
		fc.property(days, fc.integer({ min: 1, max: 30 }), (plan, trialSeconds) => {
			const design = designWith(
				[['trialSeconds'], trialSeconds],
				[
					['visits'],
					plan.map((day, i) => ({
						...visit(`Day ${i}`, 'practice', day.blocks.flatMap(asBlocks)),
						...{ setupMinutes: day.setup, cleanupMinutes: day.cleanup }
					}))
				]
			);
			// By hand: trial by trial and rest by rest.
			const seconds = plan.map(({ blocks: list, setup, cleanup }) => {
				const run = list.reduce(
					(sum, { trials, seconds: s, rest }) => sum + trials * (trialSeconds + s) + rest * 60,
					0
				);
				const between = list.slice(0, -1).reduce((sum, { after }) => sum + after * 60, 0);
				return {
					person: setup * 60 + run + between,
					rig: setup * 60 + run + between + cleanup * 60
				};
			});
			const total = (name: 'person' | 'rig') =>
				seconds.reduce((sum, one) => sum + one[name], 0) / 3600;
			for (const burden of listArmBurdens(design)) {
				expect(burden.rigHours).toBeCloseTo(total('rig'), 9);
				expect(burden.personHours).toBeCloseTo(total('person'), 9);
			}
		})
	);

	// A rest of no minutes stands last, so that each block's own rest after it counts.
	function asBlocks(one: { trials: number; seconds: number; after: number; rest: number }) {
		return [
			block('rest', 0, { restMinutes: one.rest }),
			block('practice', one.trials, {
				...{ restBetweenTrialsSeconds: one.seconds, restAfterMinutes: one.after }
			})
		];
	}
});

it('counts the span by the gaps, with every longer gap where it lengthens most', () => {
	const [adaptive] = listArmBurdens(soundDesign());
	// 3 gaps of 20, 24, 28 h and one of 144, 168, 192 h; one gap of 28 h may take 100 h.
	expect(adaptive?.spanDays.min).toBeCloseTo((3 * 20 + 144) / 24, 9);
	expect(adaptive?.spanDays.target).toBeCloseTo((3 * 24 + 168) / 24, 9);
	expect(adaptive?.spanDays.max).toBeCloseTo((3 * 28 + 192 + 72) / 24, 9);
});

it('tells arms apart by their own blocks', () => {
	const design = designWith([['visits', 1, 'armBlocks', 'fixed'], [block('practice', 30)]]);
	expect(listArmBurdens(design).map(({ trials }) => trials)).toEqual([480, 390]);
});

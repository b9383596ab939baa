import { plainBlock } from '../empty-parts';
import type { BlockDraft } from '../draft-parts';
import { createBlank, dailyGap, firstPracticeGap, retentionGap, visitOf } from '../pattern-parts';
import type { ProtocolDraft } from '../protocol-draft';
import { assumeComparison, oneInstruction, treatmentPolicy } from './assumed-parts';

/** How far the target moves in the end, m: two and a half tolerances of the puck. */
const SHIFT = 0.3;
const TRIALS = 60;

/** The same shift in small steps over a visit, or at once; then held, washed out, and tested a week later. */
export function createGradualAbrupt(): ProtocolDraft {
	const blank = createBlank();
	const first = visitOf('Day 1', 'practice', {
		blocks: [shift(0, SHIFT / 3), shift(SHIFT / 3, (2 * SHIFT) / 3), shift((2 * SHIFT) / 3, SHIFT)],
		gapBefore: firstPracticeGap
	});
	return {
		...blank,
		arms: [
			{ key: 'gradual', name: 'Gradual', rule: 'fixed', master: null },
			{ key: 'abrupt', name: 'Abrupt', rule: 'fixed', master: null }
		],
		visits: [
			visitOf('Baseline', 'baseline', {
				blocks: [listed('baseline'), listed('baseline')],
				gapBefore: dailyGap
			}),
			{ ...first, armBlocks: { abrupt: [1, 2, 3].map(() => shift(SHIFT, SHIFT)) } },
			visitOf('Day 2', 'practice', {
				blocks: [shift(SHIFT, SHIFT), shift(SHIFT, SHIFT), listed('washout'), listed('probe')],
				gapBefore: dailyGap
			}),
			visitOf('Retention', 'retention', {
				blocks: [{ ...listed('retention'), feedback: 'hidden' }],
				gapBefore: retentionGap
			})
		],
		comparison: assumeComparison('Mean signed error in the washout block', ['gradual', 'abrupt'], {
			effectD: 0.8,
			peoplePerArm: 30
		}),
		limits: { ...blank.limits, shiftMax: SHIFT },
		instructions: oneInstruction,
		analysis: {
			outcomes: [
				{
					name: 'Mean signed error in the washout block',
					unit: 'm',
					rank: 'primary',
					visitNumber: 3
				},
				{ name: 'Mean signed error at retention', unit: 'm', rank: 'secondary', visitNumber: 4 }
			],
			estimand: {
				population: 'Everybody allocated who came to the baseline visit',
				treatment: 'The same shift of the target in small steps against at once',
				variable: 'Mean signed error over the first 20 trials of the washout block',
				events: treatmentPolicy(
					'missed-practice-day',
					'withdrawal-from-practice',
					'withdrawal-from-study',
					'adverse-event-pause',
					'rig-failure'
				),
				summary: 'Difference of the means of the two arms'
			},
			analysis: 'Analysis of covariance with the signed error at baseline as covariate.',
			exclusions: 'Trials outside the ranges of the task’s variables.',
			stoppingRules: 'Pain of 4 or more stops the visit; fatigue of 7 or more brings a rest.',
			interimLooks: []
		}
	};
}

/** Thousandths of the unit: thirds of a distance are not typed in full. */
function shift(from: number, to: number): BlockDraft {
	const round = (level: number) => Math.round(level * 1000) / 1000;
	return { ...listed('shift'), shift: { from: round(from), to: round(to) } };
}

function listed(purpose: BlockDraft['purpose']): BlockDraft {
	return { ...plainBlock(purpose, TRIALS), instruction: '1', restAfterMinutes: 2 };
}

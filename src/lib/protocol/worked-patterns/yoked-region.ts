import { plainBlock, usualMissedDay } from '../empty-parts';
import { createBlank, dailyGap, firstPracticeGap, retentionGap, visitOf } from '../pattern-parts';
import type { BlockDraft } from '../draft-parts';
import type { ProtocolDraft } from '../protocol-draft';
import { assumeComparison, oneInstruction, treatmentPolicy } from './assumed-parts';

const days = [1, 2, 3, 4, 5, 6];
const told = { instruction: '1' };

/**
 * Regions chosen for each person against the same regions given to a partner, and plain practice: what
 * the choice itself is worth, beside what the regions are worth.
 */
export function createYokedRegion(): ProtocolDraft {
	const blank = createBlank();
	return {
		...blank,
		arms: [
			{ key: 'adaptive', name: 'Adaptive', rule: 'adaptive', master: null },
			{ key: 'yoked', name: 'Yoked', rule: 'yoked', master: 'adaptive' },
			{ key: 'fixed', name: 'Fixed', rule: 'fixed', master: null }
		],
		visits: [
			visitOf('Baseline', 'baseline', {
				blocks: [listed('baseline', 60), listed('baseline', 60)],
				gapBefore: dailyGap
			}),
			...days.map((day) =>
				visitOf(`Day ${day}`, 'practice', {
					blocks: Array.from({ length: 4 }, () => listed('adaptive', 60)),
					gapBefore: day === 1 ? firstPracticeGap : dailyGap
				})
			),
			visitOf('Retention', 'retention', {
				blocks: [
					{ ...listed('retention', 60), feedback: 'hidden' },
					{ ...listed('transfer', 60), feedback: 'hidden', targetOffset: 0.3 }
				],
				gapBefore: retentionGap
			})
		],
		aims: {
			region: { isOn: true, share: 1, escapes: 3 },
			shift: { ...blank.aims.shift, isOn: false }
		},
		missedDay: { ...usualMissedDay },
		relaxation: [
			{ rule: 'same-time', by: 60, price: 1 },
			{ rule: 'gap-longest', by: 4, price: 2 }
		],
		comparison: assumeComparison('Mean absolute error at retention', ['adaptive', 'yoked'], {
			effectD: 0.8,
			peoplePerArm: 30
		}),
		instructions: oneInstruction,
		analysis: {
			outcomes: [
				{ name: 'Mean absolute error at retention', unit: 'm', rank: 'primary', visitNumber: 8 },
				{ name: 'Mean absolute error at transfer', unit: 'm', rank: 'secondary', visitNumber: 8 },
				{ name: 'Covariation on the last day', unit: '', rank: 'exploratory', visitNumber: 7 }
			],
			estimand: {
				population: 'Everybody allocated who came to the baseline visit',
				treatment: 'Regions chosen for the person against the same regions chosen for a partner',
				variable: 'Mean absolute error over the 60 trials of the retention block',
				events: treatmentPolicy(
					'missed-practice-day',
					'withdrawal-from-practice',
					'fallback-block',
					'rule-overridden',
					'withdrawal-from-study',
					'adverse-event-pause',
					'rig-failure'
				),
				summary: 'Difference of the means of the two arms'
			},
			analysis:
				'Analysis of covariance with the error at baseline as covariate; the arms adaptive and yoked, then adaptive and fixed.',
			exclusions: 'Trials outside the ranges of the task’s variables.',
			stoppingRules: 'Pain of 4 or more stops the visit; fatigue of 7 or more brings a rest.',
			interimLooks: []
		}
	};
}

function listed(purpose: BlockDraft['purpose'], trials: number): BlockDraft {
	return { ...plainBlock(purpose, trials), ...told, restAfterMinutes: 2 };
}

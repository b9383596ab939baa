import { plainBlock } from '../empty-parts';
import type { BlockDraft } from '../draft-parts';
import { createBlank, dailyGap, firstPracticeGap, visitOf } from '../pattern-parts';
import type { ProtocolDraft } from '../protocol-draft';
import { oneInstruction, treatmentPolicy } from './assumed-parts';

/** One arm: what practice changes, what is kept a day later, what carries over to another target. */
export function createKeepTransfer(): ProtocolDraft {
	const blank = createBlank();
	return {
		...blank,
		arms: [{ key: 'practice', name: 'Practice', rule: 'fixed', master: null }],
		visits: [
			visitOf('Baseline', 'baseline', {
				blocks: [listed('baseline'), listed('baseline')],
				gapBefore: dailyGap
			}),
			...[1, 2, 3].map((day) =>
				visitOf(`Day ${day}`, 'practice', {
					blocks: Array.from({ length: 4 }, () => listed('practice')),
					gapBefore: day === 1 ? firstPracticeGap : dailyGap
				})
			),
			visitOf('Retention', 'retention', {
				blocks: [
					{ ...listed('retention'), feedback: 'hidden' },
					{ ...listed('transfer'), feedback: 'hidden', targetOffset: 0.3 }
				],
				gapBefore: { minHours: 24, targetHours: 24, maxHours: 28, nightsBetween: 1 }
			})
		],
		instructions: oneInstruction,
		analysis: {
			outcomes: [
				{ name: 'Mean absolute error at retention', unit: 'm', rank: 'primary', visitNumber: 5 },
				{ name: 'Mean absolute error at transfer', unit: 'm', rank: 'secondary', visitNumber: 5 }
			],
			estimand: {
				population: 'Everybody who came to the baseline visit',
				treatment: 'Three days of plain practice',
				variable: 'Mean absolute error at retention less that at baseline',
				events: treatmentPolicy(
					'missed-practice-day',
					'withdrawal-from-practice',
					'withdrawal-from-study',
					'adverse-event-pause',
					'rig-failure'
				),
				summary: 'Mean change with its 95 % interval'
			},
			analysis: 'Paired t test of retention against baseline; the same for transfer.',
			exclusions: 'Trials outside the ranges of the task’s variables.',
			stoppingRules: 'Pain of 4 or more stops the visit; fatigue of 7 or more brings a rest.',
			interimLooks: []
		}
	};
}

function listed(purpose: BlockDraft['purpose']): BlockDraft {
	return { ...plainBlock(purpose, 60), instruction: '1', restAfterMinutes: 2 };
}

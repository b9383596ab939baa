import type { LadderStep } from '../decision.ts';

/** What each rung asks, and what it means that it had nothing to say. */
export const RUNG_WORDS: Readonly<Record<LadderStep['rung'], { asks: string; passed: string }>> = {
	limits: { asks: 'May the person go on today?', passed: 'Yes: no limit is reached.' },
	person: { asks: 'Must somebody look first?', passed: 'No: nothing is held.' },
	recovery: { asks: 'Is a recovery block due?', passed: 'No: no perturbation has failed.' },
	obligations: {
		asks: 'Is a block due?',
		passed: 'No: no probe, clamp, washout, retention or transfer block is due.'
	},
	data: { asks: 'Can the last block be used?', passed: 'Yes: it shows one steady cloud.' },
	target: { asks: 'Does the person hit?', passed: 'Yes: the mean lies on the target.' },
	running: { asks: 'Is a perturbation running?', passed: 'No.' },
	goals: { asks: 'Are all aims met?', passed: 'No: an aim is open.' },
	settle: { asks: 'Does the error stand still?', passed: 'Yes: practice has settled.' },
	'cool-down': { asks: 'Is plain practice due after a perturbation?', passed: 'No.' },
	unchanged: { asks: 'Does an earlier offer stand?', passed: 'No offer stands.' },
	challenge: {
		asks: 'Can a region be penalized or the target be shifted?',
		passed: 'No: each aim is refused.'
	},
	lean: { asks: 'Does a region fit beside the mean?', passed: 'No.' },
	practice: { asks: 'What is left?', passed: 'Practice.' },
	yoked: { asks: 'What did the master get?', passed: 'Nothing.' },
	plan: { asks: 'What does the protocol list?', passed: 'Nothing.' }
};

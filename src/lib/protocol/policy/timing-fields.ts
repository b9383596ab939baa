import { real, whole, type PolicyGroup } from './policy-field';

/** Whether the first challenge may come yet. */
export const settleGroup: PolicyGroup = {
	key: 'settle',
	title: 'Judging whether people still improve',
	about: 'Looked at after each plain block before the first challenge.',
	fields: [
		whole('settle.use', [1, 20], {
			...{ label: 'Last plain blocks looked at', unit: 'blocks' },
			help: 'The trend is taken over these.'
		}),
		real('settle.margin', [0.01, 10], {
			...{ label: 'Change that counts as none', unit: 'SD of a trial' },
			help: 'Of the mean error over those blocks.'
		}),
		real('settle.z', [0.1, 6], {
			...{ label: 'Certainty asked for', unit: 'z' },
			help: 'One-sided point of the normal distribution; 1.645 is 95 %.'
		})
	]
};

/** Against rules that answer noise. */
export const bandGroup: PolicyGroup = {
	key: 'band',
	title: 'Dead band and cool-down',
	about: 'What counts as a change of the person, and how long the rule waits.',
	fields: [
		real('band.q1', [0, 1], {
			label: 'Suspect from',
			help: 'Quantile of what equal clouds show by chance. Suspect twice running counts as changed.'
		}),
		real('band.q2', [0, 1], {
			label: 'Changed at once from',
			help: 'The strict quantile. Lower values follow faster and answer noise more often.'
		}),
		real('band.wander', [0, 5], {
			...{ label: 'Means may wander by', unit: 'own SD' },
			help: 'From block to block, without being called a change.'
		}),
		real('hysteresis', [0, 20], {
			...{ label: 'Lag before the aim is changed', unit: 'blocks' },
			help: 'How far one aim must lag behind its share before the other is left for it.'
		}),
		whole('cool.blocks', [0, 20], {
			...{ label: 'Plain blocks after a challenge', unit: 'blocks' },
			help: 'After a region or shift has ended.'
		}),
		whole('cool.trials', [0, 2000], {
			...{ label: 'and plain trials', unit: 'trials' },
			help: 'Probe and recovery count; after a shift the washout comes on top.'
		}),
		real('driftKeepSd', [0.01, 20], {
			...{ label: 'Drift that may be kept', unit: 'own SD' },
			help: 'Between the first and last third of a block: below this a second drifting block is used.'
		}),
		whole('oscillation.window', [3, 100], {
			...{ label: 'Decisions looked at for going to and fro', unit: 'decisions' },
			help: 'The last so many.'
		}),
		whole('oscillation.returns', [1, 100], {
			...{ label: 'Returns that hold the case', unit: 'returns' },
			help: 'From so many on a person must look.'
		}),
		whole('stuck', [1, 100], {
			...{ label: 'Blocks without any challenge', unit: 'blocks' },
			help: 'In a row; then a person must look, once.'
		})
	]
};

/** When pain, fatigue or failure end it. */
export const personGroup: PolicyGroup = {
	key: 'limits',
	title: 'Limits of the person',
	about: 'Looked at before every block, before anything else.',
	fields: [
		real('limits.pain', [0, 10], {
			...{ label: 'Stop from pain', unit: 'of 10' },
			help: 'The person’s own rating.'
		}),
		real('limits.fatigue', [0, 10], {
			...{ label: 'Rest from fatigue', unit: 'of 10' },
			help: 'Right after a rest: stop.'
		}),
		real('limits.successMin', [0, 1], {
			label: 'A shift is taken back below',
			help: 'Share of hits in the last trials.'
		}),
		whole('limits.successWindow', [1, 2000], {
			...{ label: 'of the last', unit: 'trials' },
			help: 'Trials that this share is taken over.'
		})
	]
};

/** Looking back: probes, retention, forgetting, washout. */
export const lookingBackGroup: PolicyGroup = {
	key: 'looking-back',
	title: 'Probes, gaps and washout',
	about: 'Blocks that show what has been learned, and what a gap does.',
	fields: [
		whole('probeEvery', [1, 100], {
			...{ label: 'A probe after', unit: 'perturbed blocks' },
			help: 'Since the last probe.'
		}),
		{
			...{ path: 'retentionDays', kind: 'list', mayBeEmpty: true, most: 40 },
			...{ min: 1, max: 40, isWhole: true },
			label: 'Visits whose adaptive time begins with retention',
			help: 'Numbers of visits; baseline is 1. Empty: none inside adaptive time.'
		},
		real('retentionGapHours', [0, 8760], {
			...{ label: 'Only after a gap of', unit: 'h' },
			help: 'Shorter gaps do not test retention.'
		}),
		real('forget.tauHours', [0.1, 10000], {
			...{ label: 'A shift is forgotten with', unit: 'h' },
			help: 'Time constant: after a gap the target starts again where the person is expected to be.'
		}),
		real('forget.floor', [0, 1], {
			label: 'but kept for good',
			help: 'Share of a shift that no gap takes away.'
		}),
		{
			...{ path: 'forget.beforeAnyBlock', kind: 'choice' },
			label: 'A gap also counts before another block',
			options: [
				{ value: '', label: 'only where blocks are due' },
				{ value: 'true', label: 'always' },
				{ value: 'false', label: 'never' }
			],
			help: 'Whether forgetting is reckoned when a probe or another block comes first after the gap.'
		},
		{
			...{ path: 'washoutHolds', kind: 'optional-number', min: 0.1, max: 10 },
			...{ label: 'Washout lasts so many holds', unit: 'holds', off: 'one block' },
			help: 'Of the person’s own longest hold. Its length then tells it apart: only where operators are not blinded.'
		},
		{
			...{ path: 'holdFallback', kind: 'choice' },
			label: 'While a person must look',
			options: [
				{ value: '', label: 'nothing at once; unsettled when it is due, plain practice' },
				{ value: 'practice', label: 'plain practice' },
				{ value: 'maintenance', label: 'maintenance of what was reached' }
			],
			help: 'What runs at the rig meanwhile, so that nothing shows that a case is held.'
		}
	]
};

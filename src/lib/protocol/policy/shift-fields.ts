import { real, whole, type PolicyGroup } from './policy-field';

/** Steps of a target shift and when the next is taken (method sheet D3). */
export const shiftGroup: PolicyGroup = {
	key: 'shift',
	title: 'Target shift',
	about: 'Steps in SD of the person’s own result, and when the next is taken.',
	fields: [
		real('shift.rule.firstStepSd', [0.1, 1.5], {
			...{ label: 'First step', unit: 'own SD' },
			help: 'Below 1 SD more than one person in ten who does not follow would pass: freezing refuses it.'
		}),
		real('shift.rule.stepSd', [0.05, 1.5], {
			...{ label: 'Later steps', unit: 'own SD' },
			help: 'Larger is faster and easier to notice.'
		}),
		real('shift.rule.stepCapSd', [0.05, 1.5], {
			...{ label: 'No step larger than', unit: 'own SD' },
			help: 'Changes from 1.5 SD on are noticed.'
		}),
		whole('shift.rule.holdMin', [2, 500], {
			...{ label: 'Trials before the first look', unit: 'trials' },
			help: 'The person’s lag: earlier looks would call following failure.'
		}),
		whole('shift.rule.lookEvery', [1, 200], {
			...{ label: 'Trials between looks', unit: 'trials' },
			help: 'How often it is asked whether the person has followed.'
		}),
		whole('shift.rule.holdMax', [2, 500], {
			...{ label: 'Longest usual hold', unit: 'trials' },
			help: 'From then on the softer share counts. A washout should last three times as long.'
		}),
		whole('shift.rule.grace', [0, 500], {
			...{ label: 'Trials of grace', unit: 'trials' },
			help: 'Beyond the longest hold before the level counts as not followed and is taken back.'
		}),
		real('shift.rule.followedMin', [0, 1], {
			label: 'Followed from',
			help: 'Share of the whole shift that the person has made up.'
		}),
		real('shift.rule.followedLateMin', [0, 1], {
			label: 'Followed from, late',
			help: 'The softer share once the longest hold is over.'
		}),
		real('shift.rule.followedLowMin', [0, 1], {
			label: 'Followed for sure from',
			help: 'The share must exceed this at the lower end of its interval.'
		}),
		real('shift.rule.z', [0.1, 6], {
			...{ label: 'Certainty asked for', unit: 'z' },
			help: 'One-sided point of the normal distribution; 1.645 is 95 %.'
		}),
		real('shift.rule.hitMin', [0, 1], {
			label: 'Taken back below',
			help: 'Success in the last ten trials.'
		}),
		{
			...{ path: 'shift.rule.granularity', kind: 'choice' },
			label: 'The level changes',
			options: [
				{ value: 'trial', label: 'within a block, trial by trial' },
				{ value: 'block', label: 'between blocks only' }
			],
			help: 'Between blocks for rigs that cannot move the target while a block runs; that takes about three times as many trials.'
		},
		{
			...{ path: 'shift.rule.personal', kind: 'flag' },
			label: 'Longest hold fitted to the person',
			help: 'From the holds that they passed, once two are known well enough.'
		},
		whole('shift.maxBlocks', [1, 100], {
			...{ label: 'Blocks of one shift, at most', unit: 'blocks' },
			help: 'Then the aim is closed and a washout follows.'
		}),
		whole('shift.minPlain', [1, 2000], {
			...{ label: 'Plain trials behind the spread', unit: 'trials' },
			help: 'Before so many the person’s own SD counts as unknown, and no shift begins.'
		})
	]
};

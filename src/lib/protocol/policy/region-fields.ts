import { real, whole, type PolicyGroup } from './policy-field';

/** How a penalized region is placed (method sheet D2). */
export const placingGroup: PolicyGroup = {
	key: 'place',
	title: 'Placing a region',
	about: 'Where a region may lie for one person, and how hard it may be.',
	fields: [
		{
			...{ path: 'place.shares', kind: 'list', mayBeEmpty: false, most: 12, min: 0.01, max: 0.99 },
			label: 'Shares of own trials a region may catch',
			help: 'From the hardest to the easiest; the first that leaves a way out is taken. After an escape one step harder, after a failure one step easier.'
		},
		real('place.reachMinSd', [0, 20], {
			...{ label: 'Nearest way out', unit: 'own SD' },
			help: 'A nearer way out would need no learning.'
		}),
		real('place.reachMaxSd', [0.1, 20], {
			...{ label: 'Farthest way out', unit: 'own SD' },
			help: 'A way out beyond this is out of reach, and the region is not placed.'
		}),
		real('place.leakMin', [0, 0.99], {
			label: 'Success that must remain without moving',
			help: 'Share of trials that still hit if the person stays as they are. People who learn from success alone need some to follow; below 0.1 few find the way out.'
		}),
		real('place.successMin', [0.01, 0.99], {
			label: 'Success at the way out, at least',
			help: 'Share of trials that must hit there, outside the region.'
		}),
		real('place.successRelativeMin', [0.01, 0.99], {
			label: 'Success at the way out, beside now',
			help: 'The same as a share of what the person hits now.'
		}),
		{
			...{ path: 'place.edgeMax', kind: 'optional-number', min: 0.001, max: 0.999 },
			...{ label: 'Cloud beyond the variables’ ranges, at most', off: 'not looked at' },
			help: 'Share of the person’s trials at the way out that would lie beyond what they can do.'
		},
		{
			...{ path: 'place.coverMax', kind: 'optional-number', min: 0.001, max: 0.999 },
			...{ label: 'Perfect trials that a region may cover, at most', off: 'not looked at' },
			help: 'Share of the line of perfect trials. What the rule may do without asking is a guard rail of its own.'
		},
		real('place.exitWidth', [0.1, 10], {
			...{ label: 'Width of the cloud at the way out', unit: 'own SD' },
			help: 'How much of the person’s own spread must be clear of the region there.'
		}),
		real('place.lengthMax', [0.1, 50], {
			...{ label: 'Line searched to each side', unit: 'scaled units' },
			help: 'How far along the line of perfect trials a way out is looked for.'
		}),
		real('place.step', [0.0011, 1], {
			...{ label: 'Step of the search', unit: 'scaled units' },
			help: 'Smaller is finer and slower.'
		}),
		whole('place.pointCount', [128, 16384], {
			...{ label: 'Points behind each probability', unit: 'points' },
			help: 'Points of a fixed sequence: the same decision gives the same number every time.'
		})
	]
};

/** When a region is not the aim to take, and when it leans. */
export const openingGroup: PolicyGroup = {
	key: 'opening',
	title: 'When a region makes sense',
	about: 'Looked at before a region is placed, from the shape of the person’s cloud.',
	fields: [
		real('alignMaxDeg', [0, 90], {
			...{ label: 'Cloud across the line from', unit: '°' },
			help: 'Angle between the cloud’s long axis and the line of perfect trials beyond which the person must first learn to hit: no region.'
		}),
		real('ratioAcross', [1, 100], {
			label: 'Long enough to be across',
			help: 'Ratio of the cloud’s longer to its shorter variance from which that angle counts; round clouds of 60 trials pass 1.91 in 5 % of cases.'
		}),
		real('ratioMin', [1, 100], {
			label: 'Long enough to choose by',
			help: 'Ratio from which a cloud along the line speaks for a region as the first aim.'
		}),
		{
			...{ path: 'lean', kind: 'list', mayBeEmpty: true, most: 12, min: 0.01, max: 10 },
			...{ label: 'Distances a region may lean', unit: 'own SD' },
			help: 'Tried in this order when no region round the mean leaves a way out. Empty: regions never lean.'
		},
		real('leanCatch', [0, 1], {
			label: 'Own trials a leaning region must catch',
			help: 'Share of the person’s own next trials.'
		})
	]
};

/** How long a region runs and when it counts as escaped. */
export const regionRunGroup: PolicyGroup = {
	key: 'region',
	title: 'While a region runs',
	about: 'When it counts as escaped, and when it is given up.',
	fields: [
		real('region.relativeEscape', [0, 1], {
			label: 'Escaped from',
			help: 'Part of the way from staying (0) to all trials outside and on target (1), at the lower end of its interval.'
		}),
		whole('region.window', [1, 2000], {
			...{ label: 'Trials looked at', unit: 'trials' },
			help: 'The last so many trials decide.'
		}),
		real('region.z', [0.1, 6], {
			...{ label: 'Certainty asked for', unit: 'z' },
			help: 'One-sided point of the normal distribution; 1.645 is 95 %.'
		}),
		whole('region.maxBlocks', [1, 40], {
			...{ label: 'Blocks without escape, at most', unit: 'blocks' },
			help: 'Then recovery, and the next region is one step easier.'
		}),
		whole('region.maxFailed', [1, 40], {
			...{ label: 'Failed regions, at most', unit: 'regions' },
			help: 'Then the aim is closed for this person.'
		})
	]
};

import { createTaskDraft } from '../tasks/task-draft';
import type { ProtocolDraft } from './protocol-draft';
import {
	createBlank,
	dailyGap,
	emptyComparison,
	firstPracticeGap,
	retentionGap,
	visit
} from './pattern-parts';
import { createGradualAbrupt } from './worked-patterns/gradual-abrupt';
import { createKeepTransfer } from './worked-patterns/keep-transfer';
import { createYokedRegion } from './worked-patterns/yoked-region';

export const patternNames = [
	'two-arms',
	'yoked-region',
	'gradual-abrupt',
	'keep-transfer',
	'single-visit',
	'blank'
] as const;
export type PatternName = (typeof patternNames)[number];

/** What each pattern brings, in the words of the page that offers them. */
export const patternLabels: Record<PatternName, { label: string; detail: string }> = {
	'two-arms': {
		label: 'Two arms over eight visits',
		detail:
			'Adaptive against fixed practice: a baseline visit, six practice days about 24 h apart, retention a week later. Effect and people are yours to enter. Sliding puck.'
	},
	'yoked-region': {
		label: 'Adaptive penalized region with yoked and fixed controls',
		detail:
			'Three arms: regions chosen for each person, the same regions given to a yoked partner, plain practice. Baseline, six practice days, retention and transfer a week later. Sliding puck.'
	},
	'gradual-abrupt': {
		label: 'Gradual against abrupt target shift',
		detail:
			'Two fixed arms: the target moves by 0.3 m in small steps or at once. Baseline, two practice days with a washout, retention a week later. Sliding puck.'
	},
	'keep-transfer': {
		label: 'Baseline, practice, retention, transfer',
		detail:
			'One arm: three days of plain practice, what is kept a day later, and what carries over to another target. Sliding puck.'
	},
	'single-visit': {
		label: 'One visit with recorded blocks',
		detail: 'One arm, one visit, nothing chosen by the scheduler: for data that exists already.'
	},
	blank: {
		label: 'Blank',
		detail: 'One visit and one arm; everything else is yours to enter.'
	}
};

const creators: Readonly<Record<PatternName, () => ProtocolDraft>> = {
	'two-arms': createTwoArms,
	'yoked-region': createYokedRegion,
	'gradual-abrupt': createGradualAbrupt,
	'keep-transfer': createKeepTransfer,
	'single-visit': createSingleVisit,
	blank: createBlank
};

/** The first draft of a study. Every value is a default that the investigator may change. */
export function createPatternDraft(pattern: PatternName): ProtocolDraft {
	return creators[pattern]();
}

function createTwoArms(): ProtocolDraft {
	const baseline = visit('Baseline', 'baseline', [60, 60], dailyGap);
	const days = [1, 2, 3, 4, 5, 6].map((day) =>
		visit(`Day ${day}`, 'practice', [60, 60, 60, 60], day === 1 ? firstPracticeGap : dailyGap)
	);
	const retention = visit('Retention', 'retention', [60], retentionGap);
	return {
		...createBlank(),
		arms: [
			{ key: 'adaptive', name: 'Adaptive', rule: 'adaptive', master: null },
			{ key: 'fixed', name: 'Fixed', rule: 'fixed', master: null }
		],
		visits: [baseline, ...days, retention],
		comparison: {
			...emptyComparison(),
			outcome: 'Mean absolute error at retention',
			armA: 'adaptive',
			armB: 'fixed'
		}
	};
}

function createSingleVisit(): ProtocolDraft {
	const blank = createBlank();
	return {
		...blank,
		task: createTaskDraft('formula'),
		arms: [{ key: 'recorded', name: 'Recorded', rule: 'fixed', master: null }],
		visits: [visit('Recorded visit', 'baseline', [60], dailyGap)],
		limits: { ...blank.limits, minutesPerVisit: 120, trialsPerVisit: 2000 }
	};
}

import type { GapDraft, VisitDraft } from './draft-parts';
import { emptyAnalysis, plainBlock, usualMissedDay, usualYoking } from './empty-parts';
import type { ProtocolDraft, VariableDraft } from './protocol-draft';

export const patternNames = ['two-arms', 'single-visit', 'blank'] as const;
export type PatternName = (typeof patternNames)[number];

/** What each pattern brings, in the words of the page that offers them. */
export const patternLabels: Record<PatternName, { label: string; detail: string }> = {
	'two-arms': {
		label: 'Two arms over eight visits',
		detail:
			'Adaptive against fixed practice: a baseline visit, six practice days about 24 h apart, retention a week later. Sliding puck.'
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

/** The first draft of a study. Every value is a default that the investigator may change. */
export function createPatternDraft(pattern: PatternName): ProtocolDraft {
	if (pattern === 'two-arms') return createTwoArms();
	return pattern === 'single-visit' ? createSingleVisit() : createBlank();
}

const dailyGap: GapDraft = { minHours: 20, targetHours: 24, maxHours: 28, nightsBetween: 1 };
const firstPracticeGap: GapDraft = {
	minHours: 48,
	targetHours: 72,
	maxHours: 336,
	nightsBetween: 2
};
const retentionGap: GapDraft = {
	minHours: 144,
	targetHours: 168,
	maxHours: 192,
	nightsBetween: 6
};

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
		task: { ...blank.task, type: 'formula' },
		arms: [{ key: 'recorded', name: 'Recorded', rule: 'fixed', master: null }],
		visits: [visit('Recorded visit', 'baseline', [60], dailyGap)],
		limits: { ...blank.limits, minutesPerVisit: 120, trialsPerVisit: 2000 }
	};
}

function createBlank(): ProtocolDraft {
	return {
		format: 1,
		task: {
			type: 'puck',
			puck: { mu: 0.18, g: 9.81, D: 2, tolerance: 0.12, variables: puckVariables() },
			formula: { formula: '', resultUnit: '', tolerance: null, variables: [emptyVariable()] }
		},
		arms: [{ key: 'arm-1', name: 'Arm 1', rule: 'fixed', master: null }],
		visits: [visit('Baseline', 'baseline', [60], dailyGap)],
		booking: {
			earliest: '08:00',
			latest: '18:00',
			sameTimeToleranceMinutes: 120,
			weekdays: [1, 2, 3, 4, 5],
			pauses: { count: 1, minHours: 68, maxHours: 100 },
			dayMeaning: 'elapsed-hours'
		},
		aims: {
			region: { isOn: true, share: 0.5, escapes: 3 },
			shift: { isOn: true, share: 0.5, goal: 3 }
		},
		settle: { minBlocks: 3, maxBlocks: 6 },
		otherPolicy: {},
		guardRails: { automaticCoverMax: 0.5, automaticReachSdMax: 4 },
		readyLeadHours: 12,
		invitationDelayHours: 24,
		earliestStartHours: { min: 12, max: 36 },
		comparison: emptyComparison(),
		limits: {
			...{ minutesPerVisit: 90, trialsPerVisit: 300 },
			...{ variableMax: {}, shiftMax: null, penaltyShareMax: null }
		},
		consentTextVersion: '1',
		variants: [],
		trialSeconds: 8,
		yoking: { ...usualYoking },
		missedDay: { ...usualMissedDay },
		relaxation: [],
		instructions: [],
		analysis: emptyAnalysis(),
		justifications: {}
	};
}

function visit(
	label: string,
	kind: VisitDraft['kind'],
	trials: number[],
	gapBefore: GapDraft
): VisitDraft {
	const purpose = kind === 'practice' ? 'adaptive' : kind;
	return {
		label,
		kind,
		minutes: kind === 'practice' ? 60 : 45,
		setupMinutes: 15,
		cleanupMinutes: 10,
		gapBefore: { ...gapBefore },
		blocks: trials.map((count) => plainBlock(purpose, count)),
		armBlocks: {}
	};
}

function puckVariables(): VariableDraft[] {
	return [
		{
			name: 'release_speed',
			unit: 'm/s',
			min: 0.5,
			max: 4,
			origin: 2.486,
			scale: 0.09,
			resolution: 0.002
		},
		{
			name: 'release_position',
			unit: 'm',
			min: -0.4,
			max: 1.1,
			origin: 0.25,
			scale: 0.07,
			resolution: 0.001
		}
	];
}

/** A variable of which nothing has been said yet. */
export function emptyVariable(): VariableDraft {
	return {
		name: '',
		unit: '',
		min: null,
		max: null,
		origin: null,
		scale: null,
		resolution: null
	};
}

function emptyComparison(): ProtocolDraft['comparison'] {
	return {
		outcome: '',
		armA: '',
		armB: '',
		effectD: null,
		effectSource: '',
		alpha: 0.05,
		sides: 2,
		peoplePerArm: null,
		peopleLostShare: 0.1,
		peopleLostSource: '',
		effectLostShare: 0,
		effectLostSource: '',
		enteredBy: {}
	};
}

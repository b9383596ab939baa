import type { BlockDraft, GapDraft, VisitDraft } from './draft-parts';
import { emptyAnalysis, plainBlock, usualMissedDay, usualYoking } from './empty-parts';
import { createTaskDraft } from '../tasks/task-draft';
import type { ProtocolDraft } from './protocol-draft';

export const dailyGap: GapDraft = { minHours: 20, targetHours: 24, maxHours: 28, nightsBetween: 1 };
export const firstPracticeGap: GapDraft = {
	minHours: 48,
	targetHours: 72,
	maxHours: 336,
	nightsBetween: 2
};
export const retentionGap: GapDraft = {
	minHours: 144,
	targetHours: 168,
	maxHours: 192,
	nightsBetween: 6
};

/** One visit and one arm; everything else is open. */
export function createBlank(): ProtocolDraft {
	return {
		format: 1,
		task: createTaskDraft('puck'),
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

/** A visit with plain blocks of the usual purpose of its kind. */
export function visit(
	label: string,
	kind: VisitDraft['kind'],
	trials: number[],
	gapBefore: GapDraft
): VisitDraft {
	const purpose = kind === 'practice' ? 'adaptive' : kind;
	const blocks = trials.map((count) => plainBlock(purpose, count));
	return visitOf(label, kind, { blocks, gapBefore });
}

/** A visit with blocks of its own. */
export function visitOf(
	label: string,
	kind: VisitDraft['kind'],
	{ blocks, gapBefore }: { blocks: BlockDraft[]; gapBefore: GapDraft }
): VisitDraft {
	return {
		label,
		kind,
		minutes: kind === 'practice' ? 60 : 45,
		setupMinutes: 15,
		cleanupMinutes: 10,
		gapBefore: { ...gapBefore },
		blocks,
		armBlocks: {}
	};
}

export function emptyComparison(): ProtocolDraft['comparison'] {
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

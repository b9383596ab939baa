import { blockDraftSchema, type AnalysisDraft, type BlockDraft } from './draft-parts';

/** A block of which only kind and length are said. */
export function plainBlock(purpose: BlockDraft['purpose'], trials: number | null): BlockDraft {
	return blockDraftSchema.parse({ purpose, trials });
}

/** An analysis plan in which nothing has been written. */
export function emptyAnalysis(): AnalysisDraft {
	return {
		outcomes: [],
		estimand: { population: '', treatment: '', variable: '', events: [], summary: '' },
		analysis: '',
		exclusions: '',
		stoppingRules: '',
		interimLooks: []
	};
}

/** How a yoked arm follows until something else is chosen. */
export const usualYoking = { leadHours: 20, orphan: 'plain-practice', late: 'wait' } as const;

/** What the form of the missed-day rule opens with. */
export const usualMissedDay = { rule: 'make-up', withinHours: 48, mostMissed: 2 } as const;

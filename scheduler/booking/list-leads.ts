import { forEachStep, pauseLimitOf, startAt } from './chain-search.ts';
import type { SearchSpace, SearchStart, SearchState } from './chain-search.ts';

/** A start of the first visit that may be placed, and what led there. */
export type Lead = {
	state: SearchState;
	start: SearchStart;
	/** Clock time of the chain's first visit. */
	anchorMinute: number;
	costSoFar: number;
};

/**
 * Every start of the first visit that is not fixed and that may follow the fixed ones before it,
 * ascending.
 * @throws RangeError when every visit is fixed
 */
export function listLeads(space: SearchSpace): Lead[] {
	const stage = space.stages.findIndex(({ fixed }) => !fixed);
	const leading = space.stages[stage];
	if (!leading) throw new RangeError('every visit is fixed: there is nothing to place');
	if (stage > 0) return listFollowing(space, walkFixed(space, stage - 1));
	return leading.starts.map((start, index) => ({
		state: { stage, index, pausesUsed: 0 },
		start,
		anchorMinute: start.minute,
		costSoFar: start.extraCost
	}));
}

function listFollowing(space: SearchSpace, last: SearchState): Lead[] {
	const anchorMinute = startAt(space, { stage: 0, index: 0, pausesUsed: 0 }).minute;
	const pauseLimit = pauseLimitOf(space);
	const leads: Lead[] = [];
	forEachStep(space, last, anchorMinute, (index, used, costSoFar) => {
		const pausesUsed = Math.min(pauseLimit, used);
		const state = { stage: last.stage + 1, index, pausesUsed };
		leads.push({ state, start: startAt(space, state), anchorMinute, costSoFar });
	});
	return leads;
}

/** The state after the fixed visits 0 to `lastStage`, with the longer gaps they used. */
export function walkFixed(space: SearchSpace, lastStage: number): SearchState {
	let state: SearchState = { stage: 0, index: 0, pausesUsed: 0 };
	while (state.stage < lastStage) {
		const from = state;
		forEachStep(space, from, 0, (index, used) => {
			const pausesUsed = Math.min(pauseLimitOf(space), used);
			state = { stage: from.stage + 1, index, pausesUsed };
		});
		if (state === from) throw new Error(`fixed visit in stage ${from.stage + 1} was not reached`);
	}
	return state;
}

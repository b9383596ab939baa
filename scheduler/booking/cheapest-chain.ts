import {
	forEachStep,
	pauseLimitOf,
	startAt,
	type SearchSpace,
	type SearchStart,
	type SearchState
} from './chain-search.ts';
import type { Lead } from './list-leads.ts';

/** Cost to finish the chain and the step that does so, for each (start, pauses used) of a stage. */
type StageTable = { cost: Float64Array; next: Int32Array };

const UNKNOWN = -1;
const NO_STEP = -1;

/** Cheapest chains of a search space, by the start of the first visit that may be placed. */
export type CheapestChains = {
	/** Cost of the cheapest whole chain that begins with this lead; Infinity when there is none. */
	costFrom(lead: Lead): number;
	/** The starts of that chain, one per stage; null when there is none. */
	chainFrom(lead: Lead): SearchStart[] | null;
};

/**
 * Cheapest ways to finish a chain of visits, each found once and remembered.
 *
 * Shapes: search space in, two questions out. Units: costs in hours off target.
 * Method: exact dynamic programming over (visit, start, pauses used), one set of tables per clock
 * time of the first visit, filled only as far as questions reach.
 * Source: method sheet "Booking" 6 (best-chain dynamic programme for one person).
 * Accuracy: exact; agreement with brute force over all chains in find-chains.test.ts.
 */
export function createCheapestChains(space: SearchSpace): CheapestChains {
	const pauseLimit = pauseLimitOf(space);
	const width = pauseLimit + 1;
	const tablesByAnchor = new Map<number, StageTable[]>();

	function tablesOf(anchorMinute: number): StageTable[] {
		// Without a rule about clock times all first starts can share what was found.
		const key = space.sameTimeToleranceMinutes === null ? 0 : anchorMinute;
		let tables = tablesByAnchor.get(key);
		if (!tables) {
			tables = space.stages.map(({ starts }) => createTable(starts.length * width));
			tablesByAnchor.set(key, tables);
		}
		return tables;
	}
	function finish(state: SearchState, anchorMinute: number, tables: readonly StageTable[]): number {
		if (state.stage === space.stages.length - 1) return 0;
		const table = tables[state.stage];
		const cell = state.index * width + state.pausesUsed;
		const known = table?.cost[cell] ?? UNKNOWN;
		if (!table || known !== UNKNOWN) return known;
		let best = Infinity;
		let step = NO_STEP;
		forEachStep(space, state, anchorMinute, (index, used, cost) => {
			if (cost >= best) return;
			const pausesUsed = Math.min(pauseLimit, used);
			const to = { stage: state.stage + 1, index, pausesUsed };
			const total = cost + finish(to, anchorMinute, tables);
			if (total >= best) return;
			best = total;
			step = index * width + pausesUsed;
		});
		table.cost[cell] = best;
		table.next[cell] = step;
		return best;
	}
	function costFrom({ state, anchorMinute, costSoFar }: Lead): number {
		return costSoFar + finish(state, anchorMinute, tablesOf(anchorMinute));
	}
	function chainFrom(lead: Lead): SearchStart[] | null {
		if (costFrom(lead) === Infinity) return null;
		const tables = tablesOf(lead.anchorMinute);
		const chain = space.stages.slice(0, lead.state.stage).flatMap(({ starts }) => starts);
		let state = lead.state;
		for (;;) {
			chain.push(startAt(space, state));
			const cell = state.index * width + state.pausesUsed;
			const next = tables[state.stage]?.next[cell] ?? NO_STEP;
			if (chain.length === space.stages.length || next === NO_STEP) return chain;
			const index = Math.floor(next / width);
			state = { stage: state.stage + 1, index, pausesUsed: next - index * width };
		}
	}
	return { costFrom, chainFrom };
}

function createTable(cellCount: number): StageTable {
	return {
		cost: new Float64Array(cellCount).fill(UNKNOWN),
		next: new Int32Array(cellCount).fill(NO_STEP)
	};
}

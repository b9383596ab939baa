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
 * time of the first visit, filled only as far as questions reach. The same search without the rule
 * about clock times is a bound from below: it needs one set of tables and cuts most of the others.
 * Source: method sheet "Booking" 6 (best-chain dynamic programme for one person).
 * Accuracy: exact; agreement with brute force over all chains in find-chains.test.ts.
 */
export function createCheapestChains(space: SearchSpace): CheapestChains {
	const bound =
		space.sameTimeToleranceMinutes === null
			? null
			: createFinisher({ ...space, sameTimeToleranceMinutes: null }, null);
	const finisher = createFinisher(space, bound);
	return {
		costFrom: ({ state, anchorMinute, costSoFar }) =>
			costSoFar + finisher.costOf(state, anchorMinute),
		chainFrom({ state, anchorMinute }) {
			if (finisher.costOf(state, anchorMinute) === Infinity) return null;
			const before = space.stages.slice(0, state.stage).flatMap(({ starts }) => starts);
			return [...before, ...listStarts(space, finisher, state, anchorMinute)];
		}
	};
}

type Finisher = {
	/** Least cost of all steps after a state; Infinity when the chain cannot be finished. */
	costOf(state: SearchState, anchorMinute: number): number;
	/** The first of those steps; null at the end. */
	nextOf(state: SearchState, anchorMinute: number): SearchState | null;
};

function createFinisher(space: SearchSpace, bound: Finisher | null): Finisher {
	const pauseLimit = pauseLimitOf(space);
	const width = pauseLimit + 1;
	const lastStage = space.stages.length - 1;
	const tablesByAnchor = new Map<number, StageTable[]>();

	function tablesOf(anchorMinute: number): StageTable[] {
		// Without a rule about clock times all first starts share what was found.
		const key = space.sameTimeToleranceMinutes === null ? 0 : anchorMinute;
		let tables = tablesByAnchor.get(key);
		if (!tables) {
			tables = space.stages.map(({ starts }) => createTable(starts.length * width));
			tablesByAnchor.set(key, tables);
		}
		return tables;
	}
	function solve(state: SearchState, anchorMinute: number, tables: readonly StageTable[]): number {
		if (state.stage === lastStage) return 0;
		const table = tables[state.stage];
		const cell = state.index * width + state.pausesUsed;
		const known = table?.cost[cell] ?? UNKNOWN;
		if (!table || known !== UNKNOWN) return known;
		let best = Infinity;
		let step = NO_STEP;
		forEachStep(space, state, anchorMinute, (index, used, cost) => {
			const pausesUsed = Math.min(pauseLimit, used);
			const to = { stage: state.stage + 1, index, pausesUsed };
			if (cost + (bound?.costOf(to, anchorMinute) ?? 0) >= best) return;
			const total = cost + solve(to, anchorMinute, tables);
			if (total >= best) return;
			best = total;
			step = index * width + pausesUsed;
		});
		table.cost[cell] = best;
		table.next[cell] = step;
		return best;
	}
	return {
		costOf: (state, anchorMinute) => solve(state, anchorMinute, tablesOf(anchorMinute)),
		nextOf(state, anchorMinute) {
			const cell = state.index * width + state.pausesUsed;
			const next = tablesOf(anchorMinute)[state.stage]?.next[cell] ?? NO_STEP;
			if (next === NO_STEP) return null;
			const index = Math.floor(next / width);
			return { stage: state.stage + 1, index, pausesUsed: next - index * width };
		}
	};
}

function listStarts(
	space: SearchSpace,
	finisher: Finisher,
	first: SearchState,
	anchorMinute: number
): SearchStart[] {
	const starts: SearchStart[] = [];
	let state: SearchState | null = first;
	while (state) {
		starts.push(startAt(space, state));
		state = finisher.nextOf(state, anchorMinute);
	}
	return starts;
}

function createTable(cellCount: number): StageTable {
	return {
		cost: new Float64Array(cellCount).fill(UNKNOWN),
		next: new Int32Array(cellCount).fill(NO_STEP)
	};
}

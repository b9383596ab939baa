import type { SearchStage, SearchStart } from './chain-search.ts';
import { classifyGap, hoursBetween } from './judge-gap.ts';
import { circularMinutes } from './local-date.ts';
import type { PlacedVisit } from './types.ts';

/** What a chain costs, in the words people compare it by. */
export type ChainCost = {
	/** Sum over gaps that are no pause. */
	hoursFromTarget: number;
	pausesUsed: number;
	/** Farthest a visit starts from the clock time of the first. */
	largestDriftMinutes: number;
	rigChangeCount: number;
	/** Comparable number, the smaller the better: hours off target, pauses and drift weighed. */
	total: number;
};

/** A whole chain that keeps every rule. */
export type ProposedChain = {
	visits: PlacedVisit[];
	/** Hours from the visit before, as its rule means them; null for the first. */
	gapHours: (number | null)[];
	cost: ChainCost;
};

/** Who keeps whom: a visit that is given keeps its rig and staff where it can. */
export type CurrentPlaces = ReadonlyMap<number, PlacedVisit>;

/** Gives every start a rig and a staff member, with as few changes as its chain allows. */
export function proposeChain(options: {
	stages: readonly SearchStage[];
	starts: readonly SearchStart[];
	total: number;
	current?: CurrentPlaces;
}): ProposedChain {
	const { stages, starts, total, current } = options;
	const rigOrder = rankByUse(starts.map(({ rigIds }) => rigIds));
	const staffOrder = rankByUse(starts.map(({ staffIds }) => staffIds));
	const visits = stages.flatMap(({ plan, fixed }, index): PlacedVisit[] => {
		const start = starts[index];
		if (!start) return [];
		const now = current?.get(plan.number);
		const rigId = choose(start.rigIds, [...(now ? [now.rigId] : []), ...rigOrder]);
		const staffId = choose(start.staffIds, [...(now ? [now.staffId] : []), ...staffOrder]);
		const place = { visitNumber: plan.number, startMs: start.startMs, rigId, staffId };
		return [fixed ? { ...place, fixed } : place];
	});
	const gapHours = measureGaps(stages, starts);
	return { visits, gapHours, cost: sumCost({ stages, starts, gapHours, visits, total }) };
}

/** Most often possible first, so that a chain stays with one rig where it can. */
function rankByUse(choices: readonly (readonly string[])[]): string[] {
	const count = new Map<string, number>();
	for (const id of choices.flat()) count.set(id, (count.get(id) ?? 0) + 1);
	return [...count].sort((a, b) => b[1] - a[1]).map(([id]) => id);
}

function choose(possible: readonly string[], wished: readonly string[]): string {
	const found = wished.find((id) => possible.includes(id));
	if (found === undefined) throw new Error('a start without rig or staff is no candidate');
	return found;
}

function measureGaps(stages: readonly SearchStage[], starts: readonly SearchStart[]) {
	return starts.map((start, index) => {
		const before = starts[index - 1];
		const rule = stages[index]?.plan.gapBefore;
		return before && rule ? hoursBetween(rule, before, start) : null;
	});
}

function sumCost(options: {
	stages: readonly SearchStage[];
	starts: readonly SearchStart[];
	gapHours: readonly (number | null)[];
	visits: readonly PlacedVisit[];
	total: number;
}): ChainCost {
	const { stages, starts, gapHours, visits, total } = options;
	let [hoursFromTarget, pausesUsed, largestDriftMinutes, rigChangeCount] = [0, 0, 0, 0];
	for (const [index, start] of starts.entries()) {
		const rule = stages[index]?.plan.gapBefore;
		const hours = gapHours[index];
		const first = starts[0];
		if (rule && typeof hours === 'number') {
			if (classifyGap(rule, hours) === 'pause') pausesUsed += 1;
			else hoursFromTarget += Math.abs(hours - rule.targetHours);
		}
		const drift = first ? circularMinutes(start.minute, first.minute) : 0;
		largestDriftMinutes = Math.max(largestDriftMinutes, drift);
		const before = visits[index - 1];
		if (before && before.rigId !== visits[index]?.rigId) rigChangeCount += 1;
	}
	return { hoursFromTarget, pausesUsed, largestDriftMinutes, rigChangeCount, total };
}

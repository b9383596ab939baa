import type { CandidateStart } from './candidate-starts.ts';
import { classifyGap, hoursBetween, longestGapMs, shortestGapMs } from './judge-gap.ts';
import { circularMinutes, MINUTE_MS } from './local-date.ts';
import type { VisitPlan } from './types.ts';

/** A start in the search; `extraCost` is what placing the visit here costs by itself. */
export type SearchStart = CandidateStart & { extraCost: number };

/** One visit with the starts it may have, ascending. A fixed visit has exactly one. */
export type SearchStage = { plan: VisitPlan; fixed: boolean; starts: readonly SearchStart[] };

/** Where a search stands: a start of one stage, and how many longer gaps were used up to it. */
export type SearchState = { stage: number; index: number; pausesUsed: number };

/** Stages in the order of visits, and how far from the first one's clock time the others may be. */
export type SearchSpace = {
	stages: readonly SearchStage[];
	sameTimeToleranceMinutes: number | null;
};

/** What a longer gap and an hour off one's own clock time cost; an hour off the target gap costs 1. */
export const PAUSE_COST = 6;
export const DRIFT_COST_PER_HOUR = 0.5;

/** The most longer gaps that any rule of the chain speaks of; more need not be told apart. */
export function pauseLimitOf({ stages }: SearchSpace): number {
	return Math.max(0, ...stages.map(({ plan }) => plan.gapBefore?.allowedPauses.count ?? 0));
}

/** The start at a state; throws on a state that the space does not have. */
export function startAt({ stages }: SearchSpace, { stage, index }: SearchState): SearchStart {
	const start = stages[stage]?.starts[index];
	if (!start) throw new RangeError(`no start ${index} in stage ${stage}`);
	return start;
}

/**
 * Calls `visit` with every start of the next stage that may follow a state, and what the step costs.
 * Two fixed visits follow each other whatever the rules say: that is history.
 */
export function forEachStep(
	space: SearchSpace,
	state: SearchState,
	anchorMinute: number,
	visit: (index: number, pausesUsed: number, cost: number) => void
): void {
	const before = space.stages[state.stage];
	const next = space.stages[state.stage + 1];
	if (!before || !next) return;
	const from = startAt(space, state);
	const rule = next.plan.gapBefore;
	const isHistory = before.fixed && next.fixed;
	const { plan } = before;
	const clearMs = (plan.minutes + plan.cleanupMinutes + next.plan.setupMinutes) * MINUTE_MS;
	const soonestMs = from.startMs + Math.max(clearMs, rule ? shortestGapMs(rule) : 0);
	const latestMs = rule && !isHistory ? from.startMs + longestGapMs(rule) : Infinity;
	const firstIndex = isHistory ? 0 : indexAtOrAfter(next.starts, soonestMs);
	for (let index = firstIndex; index < next.starts.length; index += 1) {
		const to = next.starts[index];
		if (!to || to.startMs > latestMs) return;
		const gap = rule ? classifyGap(rule, hoursBetween(rule, from, to)) : 'within';
		const isPause = gap === 'pause';
		if (!isHistory && rule) {
			if (gap === 'outside' || (isPause && state.pausesUsed >= rule.allowedPauses.count)) continue;
			if (to.dayNumber - from.dayNumber < rule.nightsBetween) continue;
		}
		const driftMinutes = circularMinutes(to.minute, anchorMinute);
		const tolerance = space.sameTimeToleranceMinutes;
		if (tolerance !== null && !next.fixed && driftMinutes > tolerance) continue;
		const gapCost = rule ? Math.abs(hoursBetween(rule, from, to) - rule.targetHours) : 0;
		const driftCost = tolerance === null ? 0 : (driftMinutes / 60) * DRIFT_COST_PER_HOUR;
		const pausesUsed = state.pausesUsed + (isPause ? 1 : 0);
		visit(index, pausesUsed, (isPause ? PAUSE_COST : gapCost) + driftCost + to.extraCost);
	}
}

/** Index of the first start at or after an instant. */
export function indexAtOrAfter(starts: readonly { startMs: number }[], instantMs: number): number {
	let low = 0;
	let high = starts.length;
	while (low < high) {
		const middle = (low + high) >> 1;
		if ((starts[middle]?.startMs ?? Infinity) < instantMs) low = middle + 1;
		else high = middle;
	}
	return low;
}

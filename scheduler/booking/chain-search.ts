import type { CandidateStart } from './candidate-starts.ts';
import { classifyGap, hoursBetween, listGapSpans } from './judge-gap.ts';
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

/** Called with a start of the next stage, the pauses used up to it and what the step costs. */
export type StepVisitor = (index: number, pausesUsed: number, cost: number) => void;

/**
 * Calls `visit` with every start of the next stage that may follow a state.
 * Two fixed visits follow each other whatever the rules say: that is history.
 */
export function forEachStep(
	space: SearchSpace,
	state: SearchState,
	anchorMinute: number,
	visit: StepVisitor
): void {
	const before = space.stages[state.stage];
	const next = space.stages[state.stage + 1];
	if (!before || !next) return;
	const from = startAt(space, state);
	const rule = next.plan.gapBefore;
	if (before.fixed && next.fixed) {
		return next.starts.forEach((to, index) => {
			const isPause = rule && classifyGap(rule, hoursBetween(rule, from, to)) === 'pause';
			visit(index, state.pausesUsed + (isPause ? 1 : 0), 0);
		});
	}
	const canPause = rule !== null && state.pausesUsed < rule.allowedPauses.count;
	const judge = { space, from, next, state, anchorMinute, canPause, visit };
	const clearMs =
		(before.plan.minutes + before.plan.cleanupMinutes + next.plan.setupMinutes) * MINUTE_MS;
	const spans = rule ? listGapSpans(rule, canPause) : [{ fromMs: 0, toMs: Infinity }];
	for (const { fromMs, toMs } of spans) {
		const soonestMs = from.startMs + Math.max(clearMs, fromMs);
		const endMs = from.startMs + toMs;
		for (
			let index = indexAtOrAfter(next.starts, soonestMs);
			index < next.starts.length;
			index += 1
		) {
			const to = next.starts[index];
			if (!to || to.startMs >= endMs) break;
			offerStep(judge, index, to);
		}
	}
}

type StepJudge = {
	space: SearchSpace;
	from: SearchStart;
	next: SearchStage;
	state: SearchState;
	anchorMinute: number;
	canPause: boolean;
	visit: StepVisitor;
};

/** Judges one step by the rules that tie two visits, and offers it when it keeps them. */
function offerStep(judge: StepJudge, index: number, to: SearchStart): void {
	const { space, from, next, state, anchorMinute, canPause, visit } = judge;
	const tolerance = space.sameTimeToleranceMinutes;
	const driftMinutes = tolerance === null ? 0 : circularMinutes(to.minute, anchorMinute);
	if (tolerance !== null && driftMinutes > tolerance && !next.fixed) return;
	const stepCost = (driftMinutes / 60) * DRIFT_COST_PER_HOUR + to.extraCost;
	const rule = next.plan.gapBefore;
	if (!rule) return visit(index, state.pausesUsed, stepCost);
	if (to.dayNumber - from.dayNumber < rule.nightsBetween) return;
	const hours = hoursBetween(rule, from, to);
	const gap = classifyGap(rule, hours);
	if (gap === 'within')
		visit(index, state.pausesUsed, stepCost + Math.abs(hours - rule.targetHours));
	if (gap === 'pause' && canPause) visit(index, state.pausesUsed + 1, stepCost + PAUSE_COST);
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

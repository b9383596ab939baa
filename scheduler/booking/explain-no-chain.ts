import type { RuleName } from './broken-rule.ts';
import { SLOT_MS, tryStart } from './candidate-starts.ts';
import { forEachStep, pauseLimitOf, startAt } from './chain-search.ts';
import type { SearchSpace, SearchState } from './chain-search.ts';
import type { FreeTime } from './free-time.ts';
import { classifyGap, hoursBetween, listGapSpans } from './judge-gap.ts';
import { listLeads, walkFixed } from './list-leads.ts';
import { circularMinutes } from './local-date.ts';
import type { Interval, VisitPlan } from './types.ts';

/** Why no chain keeps every rule: the visit that finds no place, and what takes its places. */
export type ChainObstacle = {
	/** The first visit that no chain reaches. */
	visitNumber: number;
	/**
	 * Of the quarter hours that the hours of its gap leave (for the first visit: all), how many each
	 * rule takes away, most first. 'horizon': they lie beyond the end of the search.
	 */
	blockedBy: { rule: RuleName | 'horizon'; startCount: number }[];
	/** The latest start that the visit before it can have; null when it is the first. */
	lastReachedStartMs: number | null;
};

/** A state some chain reaches, with the clock time of that chain's first visit. */
type Reached = { state: SearchState; anchorMinute: number };

/**
 * Walks forward through everything reachable until a visit has no place, and counts why.
 * @throws Error when a chain exists after all
 */
export function explainNoChain(free: FreeTime, space: SearchSpace): ChainObstacle {
	const leadStage = space.stages.findIndex(({ fixed }) => !fixed);
	let before: Reached[] = [];
	if (leadStage > 0) {
		const anchorMinute = startAt(space, { stage: 0, index: 0, pausesUsed: 0 }).minute;
		before = [{ state: walkFixed(space, leadStage - 1), anchorMinute }];
	}
	let reached: Reached[] = listLeads(space);
	for (const stage of space.stages.keys()) {
		if (stage < leadStage) continue;
		if (reached.length === 0) return describeObstacle(free, { space, stage, before });
		before = reached;
		reached = stepAll(space, reached);
	}
	throw new Error('a chain exists: there is nothing to explain');
}

function stepAll(space: SearchSpace, reached: readonly Reached[]): Reached[] {
	const pauseLimit = pauseLimitOf(space);
	const found = new Map<string, Reached>();
	for (const { state, anchorMinute } of reached) {
		forEachStep(space, state, anchorMinute, (index, used) => {
			const to = { stage: state.stage + 1, index, pausesUsed: Math.min(pauseLimit, used) };
			const anchor = space.sameTimeToleranceMinutes === null ? 0 : anchorMinute;
			const key = `${index} ${to.pausesUsed} ${anchor}`;
			if (!found.has(key)) found.set(key, { state: to, anchorMinute: anchor });
		});
	}
	return [...found.values()];
}

type Blocked = { space: SearchSpace; stage: number; before: readonly Reached[] };

function describeObstacle(free: FreeTime, blocked: Blocked): ChainObstacle {
	const { space, stage, before } = blocked;
	const plan = space.stages[stage]?.plan;
	if (!plan) throw new RangeError(`no stage ${stage}`);
	const counts = new Map<RuleName | 'horizon', number>();
	for (const [startMs, chainRule] of listSlots(free, plan, blocked)) {
		const tried = startMs >= free.horizon.toMs ? null : tryStart(free, plan, startMs);
		const rule = tried === null ? 'horizon' : tried.ok ? chainRule : tried.rule;
		counts.set(rule, (counts.get(rule) ?? 0) + 1);
	}
	const ends = before.map(({ state }) => startAt(space, state).startMs);
	return {
		visitNumber: plan.number,
		blockedBy: [...counts]
			.map(([rule, startCount]) => ({ rule, startCount }))
			.sort((a, b) => b.startCount - a.startCount),
		lastReachedStartMs: stage === 0 ? null : ends.reduce((a, b) => Math.max(a, b), -Infinity)
	};
}

/** Quarter hours within the gap's hours of any state, with the chain rule that one of them breaks. */
function listSlots(free: FreeTime, plan: VisitPlan, blocked: Blocked): Map<number, RuleName> {
	const { space, stage, before } = blocked;
	const slots = new Map<number, RuleName>();
	if (stage === 0) {
		forEachSlot(free.horizon, (ms) => slots.set(ms, 'order'));
		return slots;
	}
	const rule = plan.gapBefore;
	for (const one of pickOnePerStart(before)) {
		const from = startAt(space, one.state);
		const spans = rule ? listGapSpans(rule, true) : [{ fromMs: 0, toMs: free.horizon.toMs }];
		for (const { fromMs, toMs } of spans) {
			const span = { fromMs: from.startMs + fromMs, toMs: from.startMs + toMs };
			forEachSlot(span, (startMs) => {
				if (slots.has(startMs)) return;
				const to = { startMs, ...free.labClock.read(startMs) };
				const gap = rule ? classifyGap(rule, hoursBetween(rule, from, to)) : 'within';
				if (gap !== 'outside') slots.set(startMs, chainRuleOf(blocked, one, to));
			});
		}
	}
	return slots;
}

/** Of states with the same start the one with fewest pauses used: it was the freest. */
function pickOnePerStart(reached: readonly Reached[]): Reached[] {
	const byStart = new Map<number, Reached>();
	for (const one of reached) {
		const known = byStart.get(one.state.index);
		if (!known || one.state.pausesUsed < known.state.pausesUsed) byStart.set(one.state.index, one);
	}
	return [...byStart.values()];
}

function chainRuleOf(
	{ space, stage }: Blocked,
	{ state, anchorMinute }: Reached,
	to: { startMs: number; dayNumber: number; minute: number }
): RuleName {
	const rule = space.stages[stage]?.plan.gapBefore;
	const from = startAt(space, state);
	const tolerance = space.sameTimeToleranceMinutes;
	if (rule && to.dayNumber - from.dayNumber < rule.nightsBetween) return 'nights';
	if (rule && classifyGap(rule, hoursBetween(rule, from, to)) === 'pause') {
		if (state.pausesUsed >= rule.allowedPauses.count) return 'pause-used-up';
	}
	const drift = circularMinutes(to.minute, anchorMinute);
	return tolerance !== null && drift > tolerance ? 'same-time' : 'order';
}

function forEachSlot({ fromMs, toMs }: Interval, visit: (startMs: number) => void): void {
	for (let ms = Math.ceil(fromMs / SLOT_MS) * SLOT_MS; ms < toMs; ms += SLOT_MS) visit(ms);
}

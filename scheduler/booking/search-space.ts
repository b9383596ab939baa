import { listCandidateStarts, tryStart, type CandidateStart } from './candidate-starts.ts';
import type { SearchSpace, SearchStage, SearchStart } from './chain-search.ts';
import type { FreeTime } from './free-time.ts';
import { pairWithPlan } from './planned-visit.ts';
import type { PlacedVisit, VisitPlan } from './types.ts';

/** What placing a visit at a start costs by itself (0 or more); Infinity forbids the start. */
export type StartCost = (plan: VisitPlan, start: CandidateStart) => number;

/** What a search may use beside the calendar. */
export type SpaceOptions = {
	/** Visits that stay where they are. */
	fixed: readonly PlacedVisit[];
	/** Starts to be tried although they lie off the grid: where visits are now. */
	current?: readonly PlacedVisit[];
	costOf?: StartCost;
};

/**
 * All starts of all visits of a plan: one for a fixed visit, every possible one for the others.
 * @throws RangeError when a fixed visit is not in the plan or the plan is empty
 */
export function createSearchSpace(free: FreeTime, options: SpaceOptions): SearchSpace {
	const { plan } = free.problem;
	if (plan.visits.length === 0) throw new RangeError('the plan holds no visit');
	const fixed = byVisit(free, options.fixed);
	const current = byVisit(free, options.current ?? []);
	const listOnce = rememberBy(lengthKey, (visit) => listCandidateStarts(free, visit));
	const inOrder = [...plan.visits].sort((a, b) => a.number - b.number);
	const stages = inOrder.map((visit): SearchStage => {
		const at = fixed.get(visit.number);
		if (at) return { plan: visit, fixed: true, starts: [fixedStart(free, at)] };
		const candidates = withStart(free, { visit, now: current.get(visit.number) }, listOnce(visit));
		const starts = candidates.map((one) => ({
			...one,
			extraCost: options.costOf?.(visit, one) ?? 0
		}));
		return { plan: visit, fixed: false, starts: starts.filter((one) => one.extraCost < Infinity) };
	});
	return { stages, sameTimeToleranceMinutes: plan.clockWindow.sameTimeToleranceMinutes };
}

function byVisit({ problem }: FreeTime, placed: readonly PlacedVisit[]): Map<number, PlacedVisit> {
	return new Map(pairWithPlan(problem, placed).map((visit) => [visit.plan.number, visit.placed]));
}

/** The candidates and, if it is possible and not among them, the start the visit has now. */
function withStart(
	free: FreeTime,
	{ visit, now }: { visit: VisitPlan; now: PlacedVisit | undefined },
	candidates: readonly CandidateStart[]
): readonly CandidateStart[] {
	if (!now || candidates.some(({ startMs }) => startMs === now.startMs)) return candidates;
	const tried = tryStart(free, visit, now.startMs);
	if (!tried.ok) return candidates;
	return [...candidates, tried.candidate].sort((a, b) => a.startMs - b.startMs);
}

function fixedStart(free: FreeTime, { startMs, rigId, staffId }: PlacedVisit): SearchStart {
	const local = free.labClock.read(startMs);
	return { startMs, ...local, rigIds: [rigId], staffIds: [staffId], extraCost: 0 };
}

/** Visits of one length have the same starts. */
function lengthKey({ minutes, setupMinutes, cleanupMinutes }: VisitPlan): string {
	return [minutes, setupMinutes, cleanupMinutes].join(' ');
}

function rememberBy<In, Out>(keyOf: (input: In) => string, make: (input: In) => Out) {
	const known = new Map<string, Out>();
	return (input: In): Out => {
		const key = keyOf(input);
		const found = known.get(key);
		if (found !== undefined) return found;
		const made = make(input);
		known.set(key, made);
		return made;
	};
}

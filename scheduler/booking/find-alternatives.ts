import { createCheapestChains } from './cheapest-chain.ts';
import type { SearchStage } from './chain-search.ts';
import { explainNoChain, type ChainObstacle } from './explain-no-chain.ts';
import { layOutFreeTime } from './free-time.ts';
import { listLeads } from './list-leads.ts';
import { HOUR_MS } from './local-date.ts';
import { pairWithPlan } from './planned-visit.ts';
import { proposeChain, type ProposedChain } from './propose-chain.ts';
import { createSearchSpace, type StartCost } from './search-space.ts';
import type { BookingProblem, GapRule, PlacedVisit } from './types.ts';

export type FindAlternativesOptions = {
	problem: BookingProblem;
	/** The person's chain as it is booked now; visits of the plan that it lacks are placed too. */
	chain: readonly PlacedVisit[];
	/** The visit to be moved; earlier visits stay, later ones may follow it. */
	visitNumber: number;
	/** Where it was meant to go; left out: as near as possible to where it is. */
	wantedStartMs?: number;
	/** No visit starts at or after it. */
	horizonEndMs: number;
	/** At most so many, 3 when left out. */
	alternativeCount?: number;
};

/** A chain with the visit moved, and what it takes. */
export type Alternative = ProposedChain & {
	/** Visits with another start: as many mails go out. In order. */
	moved: { visitNumber: number; fromMs: number; toMs: number }[];
	/** Visits on another rig, in order. */
	rigChanges: { visitNumber: number; fromRigId: string; toRigId: string }[];
	/** Least room to the limits of any gap beside a moved visit; null when none has limits. */
	spareMinutes: number | null;
};

export type FindAlternativesResult =
	| { ok: true; alternatives: Alternative[] }
	| { ok: false; reason: 'no-chain'; obstacle: ChainObstacle };

/** One more moved visit outweighs any shift; a change of rig or staff outweighs some. */
const MOVE_COST = 1000;
const RIG_COST = 3;
const STAFF_COST = 1;
/** Two ways with as many moves are told apart when the visit's starts are so far from each other. */
const APART_MS = HOUR_MS;

/**
 * Ways to move one visit that keep every rule, moving later visits along where they must.
 *
 * Shapes: chain and visit in; at most three whole chains out, fewest moved visits first, then by
 * hours from the wanted start and from the target gaps together; or what stands in the way.
 * Units: epoch milliseconds; hours.
 * Method: the exact search of `findChains` with a price on every visit that leaves its place.
 * Source: method sheet "Booking" 7. Accuracy: exact for a grid of quarter hours;
 * judge-starts.test.ts.
 * @throws RangeError when the chain does not hold the visit, or holds it as fixed
 * @example findAlternatives({ problem, chain, visitNumber: 6, wantedStartMs, horizonEndMs })
 */
export function findAlternatives(options: FindAlternativesOptions): FindAlternativesResult {
	const { problem, chain, visitNumber, horizonEndMs, alternativeCount = 3 } = options;
	const free = layOutFreeTime(problem, { fromMs: problem.nowMs, toMs: horizonEndMs });
	const fixed = chain.filter((one) => one.fixed || one.visitNumber < visitNumber);
	const current = chain.filter((one) => !fixed.includes(one));
	if (!current.some((one) => one.visitNumber === visitNumber)) {
		throw new RangeError(`the chain holds no visit ${visitNumber} that may be moved`);
	}
	const space = createSearchSpace(free, { fixed, current, costOf: priceMoves(options, current) });
	const cheapest = createCheapestChains(space);
	const found: Alternative[] = [];
	const ranked = listLeads(space).map((lead) => ({ lead, total: cheapest.costFrom(lead) }));
	for (const { lead, total } of ranked.sort((a, b) => a.total - b.total)) {
		if (total === Infinity || found.length === alternativeCount) break;
		const starts = cheapest.chainFrom(lead);
		if (!starts) continue;
		const one = compareWithNow(options, { stages: space.stages, starts, total });
		if (!found.some((other) => isAlike(other, one, visitNumber))) found.push(one);
	}
	if (found.length > 0) return { ok: true, alternatives: found };
	return { ok: false, reason: 'no-chain', obstacle: explainNoChain(free, space) };
}

function priceMoves(options: FindAlternativesOptions, current: readonly PlacedVisit[]): StartCost {
	const { visitNumber, wantedStartMs } = options;
	const now = new Map(current.map((one) => [one.visitNumber, one]));
	return (plan, { startMs, rigIds, staffIds }) => {
		const place = now.get(plan.number);
		if (!place) return 0;
		const isMovedVisit = plan.number === visitNumber;
		const wantedMs = isMovedVisit ? (wantedStartMs ?? place.startMs) : place.startMs;
		const shiftHours = Math.abs(startMs - wantedMs) / HOUR_MS;
		const rigCost = rigIds.includes(place.rigId) ? 0 : RIG_COST;
		const staffCost = staffIds.includes(place.staffId) ? 0 : STAFF_COST;
		// Staying where it is would be no move.
		if (isMovedVisit && startMs === place.startMs) return Infinity;
		const moveCost = startMs === place.startMs ? 0 : MOVE_COST;
		return moveCost + shiftHours + rigCost + staffCost;
	};
}

/** Another way with as many moves whose start is close by says nothing new. */
function isAlike(a: Alternative, b: Alternative, visitNumber: number): boolean {
	const startOf = ({ moved }: Alternative) =>
		moved.find((visit) => visit.visitNumber === visitNumber)?.toMs ?? 0;
	return a.moved.length === b.moved.length && Math.abs(startOf(a) - startOf(b)) < APART_MS;
}

function compareWithNow(
	{ problem, chain }: FindAlternativesOptions,
	found: Pick<Parameters<typeof proposeChain>[0], 'stages' | 'starts' | 'total'>
): Alternative {
	const now = new Map(
		pairWithPlan(problem, chain).map(({ placed }) => [placed.visitNumber, placed])
	);
	const proposed = proposeChain({ ...found, current: now });
	const changes = proposed.visits.flatMap((visit) => {
		const before = now.get(visit.visitNumber);
		return before ? [{ visitNumber: visit.visitNumber, before, visit }] : [];
	});
	return {
		...proposed,
		moved: changes
			.filter(({ before, visit }) => before.startMs !== visit.startMs)
			.map(({ visitNumber, before, visit }) => {
				return { visitNumber, fromMs: before.startMs, toMs: visit.startMs };
			}),
		rigChanges: changes
			.filter(({ before, visit }) => before.rigId !== visit.rigId)
			.map(({ visitNumber, before, visit }) => {
				return { visitNumber, fromRigId: before.rigId, toRigId: visit.rigId };
			}),
		spareMinutes: measureSpare(found.stages, proposed.gapHours)
	};
}

function measureSpare(
	stages: readonly SearchStage[],
	gapHours: readonly (number | null)[]
): number | null {
	const spares = stages.flatMap(({ plan, fixed }, index) => {
		const hours = gapHours[index];
		const isHistory = fixed && stages[index - 1]?.fixed;
		if (!plan.gapBefore || typeof hours !== 'number' || isHistory) return [];
		return [spareOf(plan.gapBefore, hours)];
	});
	return spares.length === 0 ? null : Math.round(Math.min(...spares) * 60);
}

function spareOf(rule: GapRule, hours: number): number {
	const isWithin = hours >= rule.minHours && hours <= rule.maxHours;
	const { minHours, maxHours } = isWithin ? rule : rule.allowedPauses;
	return Math.min(hours - minHours, maxHours - hours);
}

import { createCheapestChains } from './cheapest-chain.ts';
import { explainNoChain, type ChainObstacle } from './explain-no-chain.ts';
import { layOutFreeTime } from './free-time.ts';
import { listLeads, type Lead } from './list-leads.ts';
import { circularMinutes } from './local-date.ts';
import { proposeChain, type ProposedChain } from './propose-chain.ts';
import { createSearchSpace } from './search-space.ts';
import type { BookingProblem, PlacedVisit } from './types.ts';

export type FindChainsOptions = {
	problem: BookingProblem;
	/** Visits that are over or may not be moved; the others are placed around them. */
	fixed?: readonly PlacedVisit[];
	/** No visit starts at or after it. */
	horizonEndMs: number;
	/** At most so many proposals. */
	chainCount: number;
};

export type FindChainsResult =
	| { ok: true; chains: ProposedChain[] }
	| { ok: false; reason: 'no-chain'; obstacle: ChainObstacle };

/** At most so many proposals begin on one day, at clock times so far apart. */
const PROPOSALS_A_DAY = 2;
const APART_MINUTES = 180;

/**
 * The earliest whole chains of visits that keep every rule.
 *
 * Shapes: problem in; distinct proposals out (the first visit to be placed on the earliest days, at
 * most two a day at clock times three hours apart, within a day cheapest first), or what stands in
 * the way.
 * Units: epoch milliseconds; costs in hours off the target gaps.
 * Method: exact dynamic programming per first start; see `createCheapestChains`. Starts lie on the
 * quarter hour; set-up and clean-up of a person's own visits never overlap.
 * Source: method sheet "Booking" 6. Accuracy: exact; find-chains.test.ts.
 * @throws RangeError when the plan is empty, a zone is unknown, a fixed visit is not in the plan or
 * every visit is fixed
 * @example findChains({ problem, horizonEndMs: nowMs + 56 * DAY_MS, chainCount: 5 })
 */
export function findChains(options: FindChainsOptions): FindChainsResult {
	const { problem, fixed = [], horizonEndMs, chainCount } = options;
	const free = layOutFreeTime(problem, { fromMs: problem.nowMs, toMs: horizonEndMs });
	const space = createSearchSpace(free, { fixed });
	const cheapest = createCheapestChains(space);
	const chosen: PricedLead[] = [];
	for (const day of groupByDay(listLeads(space))) {
		const priced = day.map((lead) => ({ lead, total: cheapest.costFrom(lead) }));
		chooseOfDay(priced, chosen, chainCount);
		if (chosen.length === chainCount) break;
	}
	const chains = chosen.flatMap(({ lead, total }) => {
		const starts = cheapest.chainFrom(lead);
		return starts ? [proposeChain({ stages: space.stages, starts, total })] : [];
	});
	if (chains.length > 0) return { ok: true, chains };
	return { ok: false, reason: 'no-chain', obstacle: explainNoChain(free, space) };
}

type PricedLead = { lead: Lead; total: number };

function chooseOfDay(priced: PricedLead[], chosen: PricedLead[], chainCount: number): void {
	const before = chosen.length;
	for (const one of priced.filter(({ total }) => total < Infinity).sort(byCost)) {
		if (chosen.length === chainCount || chosen.length - before === PROPOSALS_A_DAY) return;
		if (!chosen.slice(before).some((other) => isAlike(other, one))) chosen.push(one);
	}
}

function byCost(a: PricedLead, b: PricedLead): number {
	return a.total - b.total || a.lead.start.startMs - b.lead.start.startMs;
}

function isAlike(a: PricedLead, b: PricedLead): boolean {
	return circularMinutes(a.lead.start.minute, b.lead.start.minute) < APART_MINUTES;
}

function groupByDay(leads: readonly Lead[]): Lead[][] {
	const days: Lead[][] = [];
	for (const lead of leads) {
		const day = days.at(-1);
		if (day?.[0]?.start.dayNumber === lead.start.dayNumber) day.push(lead);
		else days.push([lead]);
	}
	return days;
}

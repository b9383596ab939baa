import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import type { ChainObstacle } from '$scheduler/booking/explain-no-chain.ts';
import type { RuleName } from '$scheduler/booking/broken-rule.ts';
import { findChains } from '$scheduler/booking/find-chains.ts';
import type { ProposedChain } from '$scheduler/booking/propose-chain.ts';
import { findWhatWouldHelp } from '$scheduler/booking/what-would-help.ts';
import { loadPersonPlan, type PersonPlan } from './load-person-plan';

export type Proposals =
	| { ok: true; plan: PersonPlan; chains: ProposedChain[] }
	| { ok: false; reason: 'not-found' | 'nothing-to-book' }
	| { ok: false; reason: 'no-chain'; plan: PersonPlan; obstacle: ChainObstacle };

const horizonMs = 12 * 7 * 24 * 3_600_000;
/** Nobody is asked to come sooner than this. */
export const noticeMs = 2 * 3_600_000;

/**
 * The earliest chains of all visits that have no place yet, each keeping every rule around the
 * visits that have one. Nothing is held: a proposal can be taken by somebody else until it is booked.
 */
export async function proposeChains(
	db: Queryable,
	clock: Clock,
	grant: Grant<'booking:read' | 'booking:change'>,
	{ participantId, chainCount = 3 }: { participantId: string; chainCount?: number }
): Promise<Proposals> {
	const plan = await loadPersonPlan(db, clock, grant, participantId);
	if (!plan) return { ok: false, reason: 'not-found' };
	const { problem, chain } = plan;
	if (chain.length === problem.plan.visits.length) return { ok: false, reason: 'nothing-to-book' };
	const found = findChains({ ...askFor(plan, clock.now()), chainCount });
	if (!found.ok) return { ...found, plan };
	return { ok: true, plan, chains: found.chains };
}

/** The rules of which each, left out by itself, would open a chain: what to ask people for. */
export function findHelps(plan: PersonPlan, nowMs: number): RuleName[] {
	return findWhatWouldHelp(askFor(plan, nowMs));
}

function askFor({ problem, chain }: PersonPlan, nowMs: number) {
	return {
		problem: { ...problem, nowMs: nowMs + noticeMs },
		fixed: chain.map((visit) => ({ ...visit, fixed: true })),
		horizonEndMs: nowMs + horizonMs
	};
}

import type { ProposedChain } from '$scheduler/booking/propose-chain.ts';
import type { ChainObstacle } from '$scheduler/booking/explain-no-chain.ts';
import type { BrokenRule } from '$scheduler/booking/broken-rule.ts';
import type { PersonPlan } from './load-person-plan';

/** A chain that could be booked, as the page shows it. */
export type ToldChain = {
	stops: {
		visitNumber: number;
		label: string;
		startMs: number;
		rigId: string;
		staffId: string;
		rigName: string;
		isFixed: boolean;
	}[];
	gapHours: (number | null)[];
	pausesUsed: number;
	largestDriftMinutes: number;
	rigChangeCount: number;
};

export function tellChain({ problem, lab }: PersonPlan, chain: ProposedChain): ToldChain {
	const label = new Map(problem.plan.visits.map((visit) => [visit.number, visit.label]));
	const rigName = new Map(lab.rigs.map(({ id, name }) => [id, name]));
	return {
		stops: chain.visits.map(({ visitNumber, startMs, rigId, staffId, fixed }) => ({
			visitNumber,
			label: label.get(visitNumber) ?? `Visit ${visitNumber}`,
			startMs,
			rigId,
			staffId,
			rigName: rigName.get(rigId) ?? '',
			isFixed: fixed === true
		})),
		gapHours: chain.gapHours,
		pausesUsed: chain.cost.pausesUsed,
		largestDriftMinutes: chain.cost.largestDriftMinutes,
		rigChangeCount: chain.cost.rigChangeCount
	};
}

const ruleNames: Record<BrokenRule['rule'] | 'horizon', string> = {
	'clock-change-gap': 'clocks that jump',
	'in-the-past': 'being over',
	'before-earliest-start': 'the earliest start',
	order: 'the order of days',
	holiday: 'days on which the lab is closed',
	weekday: 'the weekdays of the protocol',
	nights: 'the nights between',
	'gap-too-short': 'too few hours since the visit before',
	'gap-too-long': 'too many hours since the visit before',
	'pause-used-up': 'the longer gaps being used up',
	'clock-window': 'the hours of the day in the protocol',
	'same-time': 'the distance from their own clock time',
	availability: 'the hours this person can come',
	'person-busy': 'other visits of this person',
	'rig-hours': 'the hours of the rigs',
	'rig-busy': 'rigs that are taken',
	'room-busy': 'rooms that are taken',
	'staff-hours': 'the hours of the staff',
	'staff-busy': 'staff who are taken',
	horizon: 'the end of the twelve weeks that were searched'
};

/** Why no chain keeps every rule: the visit without a place, and what takes its places away. */
export function tellObstacle(plan: PersonPlan, obstacle: ChainObstacle): string[] {
	const visit = plan.problem.plan.visits.find(({ number }) => number === obstacle.visitNumber);
	const label = visit?.label ?? `Visit ${obstacle.visitNumber}`;
	const total = obstacle.blockedBy.reduce((sum, { startCount }) => sum + startCount, 0);
	const first = `${label} finds no place in any chain that keeps every rule.`;
	if (total === 0) return [first];
	const reasons = obstacle.blockedBy
		.slice(0, 3)
		.map(({ rule, startCount }) => `${ruleNames[rule]} (${startCount} of ${total})`);
	return [first, `Of the quarter hours its gap leaves, most fall to ${reasons.join(', ')}.`];
}

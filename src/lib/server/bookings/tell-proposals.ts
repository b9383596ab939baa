import type { ProposedChain } from '$scheduler/booking/propose-chain.ts';
import type { ChainObstacle } from '$scheduler/booking/explain-no-chain.ts';
import type { RuleName } from '$scheduler/booking/broken-rule.ts';
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

const ruleNames: Record<RuleName | 'horizon', string> = {
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

const helpNames: Partial<Record<RuleName, string>> = {
	availability: 'wider hours of this person',
	'before-earliest-start': 'an earlier earliest start',
	'pause-used-up': 'one more longer gap in the protocol',
	nights: 'fewer nights between visits in the protocol',
	'same-time': 'starts further from their own clock time in the protocol',
	'clock-window': 'more hours of the day in the protocol',
	weekday: 'more weekdays in the protocol',
	holiday: 'a day less on which the lab is closed',
	'rig-hours': 'longer hours of a rig',
	'rig-busy': 'a rig that is free',
	'room-busy': 'a room that is free',
	'staff-hours': 'longer hours of the staff',
	'staff-busy': 'staff who are free'
};

type Obstacle = { obstacle: ChainObstacle; helps: readonly RuleName[] };

/** Why no chain keeps every rule: the visit without a place, what takes its places, what would help. */
export function tellObstacle(plan: PersonPlan, { obstacle, helps }: Obstacle): string[] {
	const visit = plan.problem.plan.visits.find(({ number }) => number === obstacle.visitNumber);
	const label = visit?.label ?? `Visit ${obstacle.visitNumber}`;
	const total = obstacle.blockedBy.reduce((sum, { startCount }) => sum + startCount, 0);
	const reasons = obstacle.blockedBy
		.slice(0, 3)
		.map(({ rule, startCount }) => `${ruleNames[rule]} (${startCount} of ${total})`);
	const help = helps.flatMap((rule) => helpNames[rule] ?? []);
	return [
		`${label} finds no place in any chain that keeps every rule.`,
		...(total === 0
			? []
			: [`Of the quarter hours its gap leaves, most fall to ${reasons.join(', ')}.`]),
		help.length === 0
			? 'No single change would open a chain.'
			: `Each of these by itself would open one: ${help.join('; ')}.`
	];
}

import type { ChainObstacle } from '../../booking/explain-no-chain.ts';
import type { RuleName } from '../../booking/broken-rule.ts';
import type { ChainPlan } from '../../booking/types.ts';
import { joinWords } from '../walk-design.ts';

const RULES: Readonly<Record<RuleName | 'horizon', string>> = {
	'gap-too-short': 'the shortest gap',
	'gap-too-long': 'the longest gap',
	'pause-used-up': 'the number of longer gaps',
	nights: 'the nights between',
	order: 'the order of visits',
	'clock-window': 'the clock window',
	'same-time': 'the same time of day',
	weekday: 'the weekdays',
	holiday: 'holidays of the lab',
	'rig-hours': 'the hours of the rigs',
	'rig-busy': 'rigs that are taken',
	'room-busy': 'rooms that are taken',
	'staff-hours': 'the hours of staff',
	'staff-busy': 'staff that is taken',
	'person-busy': 'the person’s other appointments',
	availability: 'the times that the person can come',
	'before-earliest-start': 'the earliest start',
	'in-the-past': 'the time that has passed',
	'clock-change-gap': 'the hour that clocks skip',
	horizon: 'the end of the search'
};

const REMEDIES: Partial<Record<RuleName, string>> = {
	availability: 'ask for people who can come at more times',
	'pause-used-up': 'allow one more longer gap',
	nights: 'ask for fewer nights between',
	'same-time': 'let starts differ more from the first',
	'clock-window': 'widen the clock window',
	weekday: 'allow more weekdays',
	holiday: 'open the lab on its holidays, or start at another time of the year',
	'rig-hours': 'open the rigs longer',
	'rig-busy': 'take another rig, or let people come more slowly',
	'room-busy': 'take another room',
	'staff-hours': 'extend the hours of staff',
	'staff-busy': 'take more staff, or let people come more slowly',
	'before-earliest-start': 'lower the earliest start'
};

/** Why a chain found no place: the visit, and what takes most of its places away. */
export function describeObstacle(
	plan: ChainPlan,
	{ visitNumber, blockedBy }: ChainObstacle
): string {
	const label = plan.visits.find(({ number }) => number === visitNumber)?.label ?? '';
	const most = blockedBy.slice(0, 2).map(({ rule }) => RULES[rule]);
	return `${label || `Visit ${visitNumber}`} finds no place${most.length > 0 ? `: ${joinWords(most)} ${most.length === 1 ? 'takes' : 'take'} the starts that its gap leaves` : ''}.`;
}

/** What would let the chain be, each alone; nothing known: a gap itself must change. */
export function describeHelp(rules: readonly RuleName[]): string {
	const known = rules.flatMap((rule) => REMEDIES[rule] ?? []).slice(0, 3);
	if (known.length === 0) return 'No single rule is to blame: widen the gap before this visit.';
	const [first = '', ...rest] = known;
	const start = first.slice(0, 1).toUpperCase() + first.slice(1);
	return `${[start, ...rest].join('; or ')}.`;
}

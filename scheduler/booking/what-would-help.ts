import type { RuleName } from './broken-rule.ts';
import { createCheapestChains } from './cheapest-chain.ts';
import type { FindChainsOptions } from './find-chains.ts';
import { layOutFreeTime } from './free-time.ts';
import { listLeads } from './list-leads.ts';
import { createSearchSpace } from './search-space.ts';
import type {
	BookingProblem,
	ClockWindow,
	GapRule,
	LabCalendar,
	Participant,
	Weekday,
	WeeklyWindow
} from './types.ts';

/** The same problem without one rule; null where the rule takes nothing away. */
type Relaxation = (problem: BookingProblem) => BookingProblem | null;

const EVERY_DAY: readonly Weekday[] = [1, 2, 3, 4, 5, 6, 7];
const ALWAYS: WeeklyWindow[] = EVERY_DAY.map((weekday) => {
	return { weekday, fromMinute: 0, toMinute: 1440 };
});

const RELAXATIONS: readonly [RuleName, Relaxation][] = [
	['availability', (problem) => withParticipant(problem, { availability: null })],
	['person-busy', (problem) => withParticipant(problem, { busy: [] })],
	['before-earliest-start', (problem) => withParticipant(problem, { earliestStartMs: null })],
	['pause-used-up', (problem) => withGaps(problem, allowOneMorePause)],
	['nights', (problem) => withGaps(problem, (rule) => ({ ...rule, nightsBetween: 0 }))],
	['same-time', (problem) => withWindow(problem, { sameTimeToleranceMinutes: null })],
	['clock-window', (problem) => withWindow(problem, { earliestMinute: 0, latestMinute: 1439 })],
	['weekday', ({ plan, ...rest }) => ({ ...rest, plan: { ...plan, weekdays: EVERY_DAY } })],
	['holiday', (problem) => withCalendar(problem, { holidays: [] })],
	['rig-hours', (problem) => withCalendar(problem, { rigs: openAlways(problem.calendar.rigs) })],
	['rig-busy', (problem) => withCalendar(problem, { rigs: clear(problem.calendar.rigs) })],
	['room-busy', (problem) => withCalendar(problem, { rooms: clear(problem.calendar.rooms) })],
	[
		'staff-hours',
		(problem) => withCalendar(problem, { staff: openAlways(problem.calendar.staff) })
	],
	['staff-busy', (problem) => withCalendar(problem, { staff: clear(problem.calendar.staff) })]
];

/**
 * When no chain keeps every rule: the rules of which each, dropped alone, would leave a chain. For
 * telling people what to ask for; nothing is ever booked against a rule.
 *
 * Shapes: the finder's options in, names of rules out; empty when no single rule is the cause.
 * 'pause-used-up' means one more longer gap.
 * Method: the exact search once for each rule left out. Source: method sheet "Booking" 7.
 * Accuracy: exact; scheduler/booking/find-chains.test.ts.
 * @throws RangeError as `findChains` does
 * @example findWhatWouldHelp({ problem, horizonEndMs }) // ['availability']
 */
export function findWhatWouldHelp(options: Omit<FindChainsOptions, 'chainCount'>): RuleName[] {
	const helpful = RELAXATIONS.filter(([, relax]) => {
		const relaxed = relax(options.problem);
		return relaxed !== null && hasChain(relaxed, options);
	});
	return helpful.map(([rule]) => rule);
}

function hasChain(
	problem: BookingProblem,
	{ horizonEndMs, fixed = [] }: Omit<FindChainsOptions, 'chainCount'>
): boolean {
	const free = layOutFreeTime(problem, { fromMs: problem.nowMs, toMs: horizonEndMs });
	const space = createSearchSpace(free, { fixed });
	const cheapest = createCheapestChains(space);
	return listLeads(space).some((lead) => cheapest.costFrom(lead) < Infinity);
}

function allowOneMorePause(rule: GapRule): GapRule {
	const { allowedPauses } = rule;
	return { ...rule, allowedPauses: { ...allowedPauses, count: allowedPauses.count + 1 } };
}

function withGaps(
	{ plan, ...rest }: BookingProblem,
	change: (rule: GapRule) => GapRule
): BookingProblem {
	const visits = plan.visits.map(({ gapBefore, ...visit }) => ({
		...visit,
		gapBefore: gapBefore && change(gapBefore)
	}));
	return { ...rest, plan: { ...plan, visits } };
}

function withWindow({ plan, ...rest }: BookingProblem, change: Partial<ClockWindow>) {
	const clockWindow = changed(plan.clockWindow, change);
	return clockWindow && { ...rest, plan: { ...plan, clockWindow } };
}

function withParticipant({ participant, ...rest }: BookingProblem, change: Partial<Participant>) {
	const freer = changed(participant, change);
	return freer && { ...rest, participant: freer };
}

function withCalendar({ calendar, ...rest }: BookingProblem, change: Partial<LabCalendar>) {
	const freer = changed(calendar, change);
	return freer && { ...rest, calendar: freer };
}

/** The whole with parts replaced; null when that changes nothing. */
function changed<Whole extends object>(whole: Whole, change: Partial<Whole>): Whole | null {
	const result = { ...whole, ...change };
	return JSON.stringify(result) === JSON.stringify(whole) ? null : result;
}

function openAlways<One>(resources: readonly One[]): (One & { hours: WeeklyWindow[] })[] {
	return resources.map((one) => ({ ...one, hours: ALWAYS }));
}

function clear<One>(resources: readonly One[]): (One & { busy: [] })[] {
	return resources.map((one) => ({ ...one, busy: [] }));
}

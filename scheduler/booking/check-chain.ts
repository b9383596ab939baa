import { RULE_ORDER, type BrokenRule } from './broken-rule.ts';
import { checkGap, type GapHistory } from './check-gap.ts';
import { checkPlace } from './check-place.ts';
import { circularMinutes } from './local-date.ts';
import { pairWithPlan, type PlannedVisit } from './planned-visit.ts';
import type { BookingProblem, PlacedVisit } from './types.ts';
import { getZoneClock } from './zone-clock.ts';

/**
 * Every rule that a chain of visits breaks, in chain order and per visit in `RULE_ORDER`; empty
 * when the chain keeps them all. Shares no search code with the finder, so that either finds the
 * other's mistakes.
 *
 * Shapes: the problem and one person's visits (any order, one per number) in, list out. A gap is
 * judged between neighbours in the chain by the later visit's rule. Fixed visits count for the gaps
 * of others; a rule between two fixed visits is history and not named.
 * Units: epoch milliseconds, minutes of the local day, hours.
 * Method: direct reading of each rule; opening hours minute by minute on the local clock.
 * Source: method sheet "Booking" 6, 8 and 9.
 * Accuracy: exact; scheduler/booking/check-chain.test.ts, agreement with brute force in
 * find-chains.test.ts.
 * @throws RangeError when a visit number is not in the plan or stands twice
 * @example checkChain(problem, visits).length === 0 // may be booked
 */
export function checkChain(problem: BookingProblem, chain: readonly PlacedVisit[]): BrokenRule[] {
	const visits = pairWithPlan(problem, chain);
	const history: GapHistory = { pausesUsed: 0 };
	return visits.flatMap((visit, index) => {
		const previous = visits[index - 1];
		const gap = previous ? checkGap(problem, { previous, visit, history }) : [];
		const isHistory = visit.placed.fixed && previous?.placed.fixed;
		const place = visit.placed.fixed ? [] : checkPlace(problem, visits, visit);
		return sortRules([
			...(isHistory ? [] : gap),
			...checkSameTime(problem, visits, visit),
			...place
		]);
	});
}

function checkSameTime(
	{ plan, calendar }: BookingProblem,
	visits: readonly PlannedVisit[],
	{ placed }: PlannedVisit
): BrokenRule[] {
	const toleranceMinutes = plan.clockWindow.sameTimeToleranceMinutes;
	const first = visits[0];
	if (toleranceMinutes === null || !first || (placed.fixed && first.placed.fixed)) return [];
	const clock = getZoneClock(calendar.zone);
	const startMinute = clock.read(placed.startMs).minute;
	const firstStartMinute = clock.read(first.placed.startMs).minute;
	const differenceMinutes = circularMinutes(startMinute, firstStartMinute);
	if (differenceMinutes <= toleranceMinutes) return [];
	const where = { visitNumber: placed.visitNumber, startMs: placed.startMs };
	const minutes = { startMinute, firstStartMinute, differenceMinutes, toleranceMinutes };
	return [{ rule: 'same-time', ...where, ...minutes }];
}

function sortRules(broken: BrokenRule[]): BrokenRule[] {
	const rank = (one: BrokenRule) => RULE_ORDER.indexOf(one.rule);
	return broken.sort((a, b) => rank(a) - rank(b));
}

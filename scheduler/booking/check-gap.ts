import type { BrokenRule } from './broken-rule.ts';
import { HOUR_MS, MINUTE_MS } from './local-date.ts';
import type { PlannedVisit } from './planned-visit.ts';
import type { BookingProblem, GapRule, LabCalendar } from './types.ts';
import { getZoneClock } from './zone-clock.ts';

/** What earlier gaps of the chain have used up; {@link checkGap} adds to it. */
export type GapHistory = { pausesUsed: number };

type Neighbours = { previous: PlannedVisit; visit: PlannedVisit; history: GapHistory };

/** Order, hours and nights between one visit and the one before it. */
export function checkGap(problem: BookingProblem, neighbours: Neighbours): BrokenRule[] {
	const { previous, visit } = neighbours;
	const { visitNumber, startMs } = visit.placed;
	const previousEndMs = previous.placed.startMs + previous.plan.minutes * MINUTE_MS;
	const previousVisitNumber = previous.plan.number;
	if (startMs < previousEndMs) {
		return [{ rule: 'order', visitNumber, startMs, previousVisitNumber, previousEndMs }];
	}
	const rule = visit.plan.gapBefore;
	if (!rule) return [];
	const nights = countNights(problem.calendar, previous.placed.startMs, startMs);
	const hours = checkHours(problem, neighbours, rule);
	if (nights >= rule.nightsBetween) return hours;
	const minNights = rule.nightsBetween;
	const where = { visitNumber, startMs, previousVisitNumber };
	return [{ rule: 'nights', ...where, nights, minNights }, ...hours];
}

function checkHours(
	{ calendar }: BookingProblem,
	{ previous, visit, history }: Neighbours,
	rule: GapRule
): BrokenRule[] {
	const { visitNumber, startMs } = visit.placed;
	const gapHours = measureGapHours(calendar, rule, previous.placed.startMs, startMs);
	if (gapHours >= rule.minHours && gapHours <= rule.maxHours) return [];
	const { allowedPauses: pause, minHours, maxHours } = rule;
	const facts = { visitNumber, startMs, gapHours, minHours, maxHours, kind: visit.plan.kind };
	const gap = { ...facts, previousVisitNumber: previous.plan.number };
	const isPause = pause.count > 0 && gapHours >= pause.minHours && gapHours <= pause.maxHours;
	if (!isPause) return [{ rule: gapHours < minHours ? 'gap-too-short' : 'gap-too-long', ...gap }];
	const usedCount = history.pausesUsed;
	history.pausesUsed += 1;
	if (usedCount < pause.count) return [];
	return [{ rule: 'pause-used-up', ...gap, allowedCount: pause.count, usedCount }];
}

/** Hours from start to start as the rule means them: passed, or by the clock on the wall. */
export function measureGapHours(
	{ zone }: Pick<LabCalendar, 'zone'>,
	rule: Pick<GapRule, 'hoursMean'>,
	earlierMs: number,
	laterMs: number
): number {
	if (rule.hoursMean !== 'clock') return (laterMs - earlierMs) / HOUR_MS;
	const clock = getZoneClock(zone);
	const shiftMs = clock.offsetMs(laterMs) - clock.offsetMs(earlierMs);
	return (laterMs + shiftMs - earlierMs) / HOUR_MS;
}

function countNights({ zone }: LabCalendar, earlierMs: number, laterMs: number): number {
	const clock = getZoneClock(zone);
	return clock.read(laterMs).dayNumber - clock.read(earlierMs).dayNumber;
}

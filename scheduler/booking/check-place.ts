import type { BrokenRule } from './broken-rule.ts';
import { checkResources } from './check-resources.ts';
import { overlaps } from './intervals.ts';
import { MINUTE_MS, toLocalDate, toWeekday } from './local-date.ts';
import type { PlannedVisit } from './planned-visit.ts';
import type { BookingProblem, ClockWindow } from './types.ts';
import { liesInsideHours } from './weekly-hours.ts';
import { getZoneClock } from './zone-clock.ts';

/** Every rule about one visit's own place: day, hour, person, rig, room and staff. */
export function checkPlace(
	problem: BookingProblem,
	chain: readonly PlannedVisit[],
	visit: PlannedVisit
): BrokenRule[] {
	return [
		...checkLimits(problem, visit),
		...checkDay(problem, visit),
		...checkPerson(problem, visit),
		...checkResources(problem, chain, visit)
	];
}

function checkLimits({ participant, nowMs }: BookingProblem, visit: PlannedVisit): BrokenRule[] {
	const broken: BrokenRule[] = [];
	const { startMs } = visit.placed;
	const where = { visitNumber: visit.plan.number, startMs };
	const { earliestStartMs } = participant;
	if (startMs < nowMs) broken.push({ rule: 'in-the-past', ...where, nowMs });
	if (earliestStartMs !== null && startMs < earliestStartMs) {
		broken.push({ rule: 'before-earliest-start', ...where, earliestStartMs });
	}
	return broken;
}

function checkDay({ plan, calendar }: BookingProblem, visit: PlannedVisit): BrokenRule[] {
	const broken: BrokenRule[] = [];
	const { startMs } = visit.placed;
	const where = { visitNumber: visit.plan.number, startMs };
	const { dayNumber, minute } = getZoneClock(calendar.zone).read(startMs);
	const date = toLocalDate(dayNumber);
	const weekday = toWeekday(dayNumber);
	if (calendar.holidays.includes(date)) broken.push({ rule: 'holiday', ...where, date });
	if (!plan.weekdays.includes(weekday)) {
		broken.push({ rule: 'weekday', ...where, weekday, allowedWeekdays: plan.weekdays });
	}
	if (!isInClockWindow(plan.clockWindow, minute)) {
		const { earliestMinute, latestMinute } = plan.clockWindow;
		const minutes = { startMinute: minute, earliestMinute, latestMinute };
		broken.push({ rule: 'clock-window', ...where, ...minutes });
	}
	return broken;
}

function isInClockWindow({ earliestMinute, latestMinute }: ClockWindow, minute: number): boolean {
	if (earliestMinute <= latestMinute) return minute >= earliestMinute && minute <= latestMinute;
	return minute >= earliestMinute || minute <= latestMinute;
}

function checkPerson({ participant }: BookingProblem, visit: PlannedVisit): BrokenRule[] {
	const broken: BrokenRule[] = [];
	const { startMs } = visit.placed;
	const where = { visitNumber: visit.plan.number, startMs };
	const during = { fromMs: startMs, toMs: startMs + visit.plan.minutes * MINUTE_MS };
	const { availability, zone } = participant;
	if (availability && !liesInsideHours(during, availability, zone)) {
		broken.push({ rule: 'availability', ...where, visit: during, zone });
	}
	const busy = participant.busy.find((interval) => overlaps(interval, during));
	if (busy) broken.push({ rule: 'person-busy', ...where, busy });
	return broken;
}

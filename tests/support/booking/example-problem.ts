import { DAY_MS, toDayNumber } from '$scheduler/booking/local-date.ts';
import type {
	BookingProblem,
	ChainPlan,
	GapRule,
	LabCalendar,
	Participant,
	VisitPlan,
	Weekday,
	WeeklyWindow
} from '$scheduler/booking/types.ts';
import { getZoneClock } from '$scheduler/booking/zone-clock.ts';

/** Monday to Friday, by the lab's clock. */
export function workingHours(fromHour: number, toHour: number): WeeklyWindow[] {
	const days: Weekday[] = [1, 2, 3, 4, 5];
	return days.map((weekday) => ({
		weekday,
		fromMinute: fromHour * 60,
		toMinute: toHour * 60
	}));
}

export const DAILY_GAP: GapRule = {
	minHours: 20,
	targetHours: 24,
	maxHours: 28,
	nightsBetween: 1,
	allowedPauses: { count: 1, minHours: 68, maxHours: 100 }
};

export const RETENTION_GAP: GapRule = {
	minHours: 144,
	targetHours: 168,
	maxHours: 192,
	nightsBetween: 1,
	allowedPauses: { count: 0, minHours: 0, maxHours: 0 }
};

/** A visit of an hour with a quarter hour before and after. */
export function makeVisit(number: number, part: Partial<VisitPlan> = {}): VisitPlan {
	return {
		number,
		label: `Day ${number}`,
		kind: 'practice',
		minutes: 60,
		setupMinutes: 15,
		cleanupMinutes: 15,
		gapBefore: number === 1 ? null : DAILY_GAP,
		...part
	};
}

/** Baseline, six practice days, retention a week later. */
export function makeStudyPlan(part: Partial<ChainPlan> = {}): ChainPlan {
	const practice = [2, 3, 4, 5, 6, 7].map((number) => makeVisit(number));
	const retention = makeVisit(8, {
		kind: 'retention',
		label: 'Retention',
		gapBefore: RETENTION_GAP
	});
	return {
		visits: [makeVisit(1, { kind: 'baseline', label: 'Baseline' }), ...practice, retention],
		clockWindow: { earliestMinute: 540, latestMinute: 1020, sameTimeToleranceMinutes: 120 },
		weekdays: [1, 2, 3, 4, 5],
		...part
	};
}

export function makeCalendar(part: Partial<LabCalendar> = {}): LabCalendar {
	return {
		zone: 'Europe/Lisbon',
		holidays: [],
		rigs: [
			{ id: 'gull', roomId: 'east', hours: workingHours(9, 17), busy: [] },
			{ id: 'heron', roomId: 'west', hours: workingHours(9, 17), busy: [] }
		],
		rooms: [
			{ id: 'east', busy: [] },
			{ id: 'west', busy: [] }
		],
		staff: [{ id: 'rui', hours: workingHours(8, 18), busy: [] }],
		...part
	};
}

export function makeParticipant(part: Partial<Participant> = {}): Participant {
	return { zone: 'Europe/Lisbon', availability: null, busy: [], earliestStartMs: null, ...part };
}

export function makeProblem(part: Partial<BookingProblem> = {}): BookingProblem {
	return {
		plan: makeStudyPlan(),
		calendar: makeCalendar(),
		participant: makeParticipant(),
		nowMs: at('2027-02-22', '08:00'),
		...part
	};
}

/** The one instant of a local time. */
export function at(date: string, time: string, zone = 'Europe/Lisbon'): number {
	const [hour = '', minute = ''] = time.split(':');
	const local = { dayNumber: toDayNumber(date), minute: Number(hour) * 60 + Number(minute) };
	const [instant, ...more] = getZoneClock(zone).findInstants(local);
	if (instant === undefined || more.length > 0) throw new RangeError(`${date} ${time} in ${zone}`);
	return instant;
}

export const weeks = (count: number): number => count * 7 * DAY_MS;

import { describe, expect, it } from 'vitest';
import type { RuleName } from './broken-rule.ts';
import { checkChain } from './check-chain.ts';
import { HOUR_MS } from './local-date.ts';
import {
	at,
	DAILY_GAP,
	makeCalendar,
	makeParticipant,
	makeProblem,
	makeStudyPlan,
	makeVisit,
	workingHours
} from '../../tests/support/booking/example-problem.ts';
import type { BookingProblem, ChainPlan, GapRule, PlacedVisit } from './types.ts';

/** Three days in a row. */
const PLAN: ChainPlan = makeStudyPlan({ visits: [1, 2, 3].map((number) => makeVisit(number)) });
const PROBLEM: BookingProblem = makeProblem({ plan: PLAN });

function place(visitNumber: number, date: string, time: string): PlacedVisit {
	return { visitNumber, startMs: at(date, time), rigId: 'gull', staffId: 'rui' };
}

const CHAIN = [
	place(1, '2027-02-23', '11:00'),
	place(2, '2027-02-24', '11:00'),
	place(3, '2027-02-25', '11:00')
];

function rulesOf(problem: BookingProblem, chain: readonly PlacedVisit[]): [number, RuleName][] {
	return checkChain(problem, chain).map(({ visitNumber, rule }) => [visitNumber, rule]);
}

function withVisit(moved: PlacedVisit): PlacedVisit[] {
	return CHAIN.map((visit) => (visit.visitNumber === moved.visitNumber ? moved : visit));
}

function withGap(part: Partial<GapRule>): BookingProblem {
	const visits = PLAN.visits.map((visit) =>
		visit.gapBefore ? { ...visit, gapBefore: { ...visit.gapBefore, ...part } } : visit
	);
	return makeProblem({ plan: { ...PLAN, visits } });
}

describe('a chain that keeps every rule', () => {
	it('breaks none', () => {
		expect(checkChain(PROBLEM, CHAIN)).toEqual([]);
		expect(checkChain(PROBLEM, [...CHAIN].reverse())).toEqual([]);
	});

	it('may hold one pause over a weekend', () => {
		const chain = [
			place(1, '2027-02-25', '11:00'),
			place(2, '2027-02-26', '11:00'),
			place(3, '2027-03-01', '11:00')
		];
		expect(checkChain(PROBLEM, chain)).toEqual([]);
		expect(
			rulesOf(withGap({ allowedPauses: { ...DAILY_GAP.allowedPauses, count: 0 } }), chain)
		).toEqual([[3, 'gap-too-long']]);
	});

	it('keeps a 20 to 28 h gap over both changes of clocks', () => {
		const everyDay = makeProblem({
			plan: { ...PLAN, weekdays: [1, 2, 3, 4, 5, 6, 7] },
			calendar: makeCalendar({
				rigs: [{ id: 'gull', roomId: null, hours: allWeek(), busy: [] }],
				staff: [{ id: 'rui', hours: allWeek(), busy: [] }]
			})
		});
		const spring = [
			place(1, '2027-03-27', '11:00'),
			place(2, '2027-03-28', '11:00'),
			place(3, '2027-03-29', '11:00')
		];
		expect(checkChain(everyDay, spring)).toEqual([]);
	});
});

function allWeek() {
	const weekend = ([6, 7] as const).map((weekday) => ({ weekday, fromMinute: 0, toMinute: 1440 }));
	return [...workingHours(0, 24), ...weekend];
}

describe('every broken rule is named with its numbers', () => {
	it('gap too short and too long', () => {
		const early = checkChain(
			withGap({ minHours: 23.5 }),
			withVisit(place(2, '2027-02-24', '10:00'))
		);
		expect(early).toEqual([
			{
				rule: 'gap-too-short',
				visitNumber: 2,
				previousVisitNumber: 1,
				startMs: at('2027-02-24', '10:00'),
				gapHours: 23,
				minHours: 23.5,
				maxHours: 28,
				kind: 'practice'
			}
		]);
		expect(rulesOf(PROBLEM, withVisit(place(3, '2027-02-26', '11:00')))).toEqual([
			[3, 'gap-too-long']
		]);
	});

	it('a second pause is one too many', () => {
		const chain = [
			place(1, '2027-02-26', '11:00'),
			place(2, '2027-03-01', '11:00'),
			place(3, '2027-03-04', '11:00')
		];
		expect(checkChain(PROBLEM, chain)).toMatchObject([
			{ rule: 'pause-used-up', visitNumber: 3, gapHours: 72, allowedCount: 1, usedCount: 1 }
		]);
	});

	it('order of visits, and nothing about hours when the order is wrong', () => {
		expect(rulesOf(PROBLEM, withVisit(place(2, '2027-02-23', '11:30')))).toContainEqual([
			2,
			'order'
		]);
		expect(checkChain(PROBLEM, withVisit(place(3, '2027-02-24', '11:45')))).toMatchObject([
			{ rule: 'order', previousVisitNumber: 2, previousEndMs: at('2027-02-24', '12:00') },
			{ rule: 'rig-busy' },
			{ rule: 'staff-busy' }
		]);
	});

	it('nights between, by the calendar of the lab', () => {
		const problem = withGap({ minHours: 2 });
		const chain = withVisit(place(2, '2027-02-23', '13:00'));
		expect(checkChain(problem, chain.slice(0, 2))).toMatchObject([
			{ rule: 'nights', visitNumber: 2, nights: 0, minNights: 1 }
		]);
	});

	it('hours of the day and own clock time', () => {
		const problem = makeProblem({
			plan: { ...PLAN, clockWindow: { ...PLAN.clockWindow, latestMinute: 720 } }
		});
		expect(checkChain(problem, withVisit(place(2, '2027-02-24', '13:15')))).toMatchObject([
			{ rule: 'clock-window', visitNumber: 2, startMinute: 795, latestMinute: 720 },
			{ rule: 'same-time', differenceMinutes: 135, firstStartMinute: 660, toleranceMinutes: 120 }
		]);
	});

	it('clock times are compared the short way round midnight', () => {
		const nightly = makeProblem({
			plan: {
				...PLAN,
				clockWindow: { earliestMinute: 1380, latestMinute: 60, sameTimeToleranceMinutes: 45 }
			},
			calendar: makeCalendar({
				rigs: [{ id: 'gull', roomId: null, hours: allWeek(), busy: [] }],
				staff: [{ id: 'rui', hours: allWeek(), busy: [] }]
			})
		});
		const chain = [
			place(1, '2027-02-23', '23:45'),
			place(2, '2027-02-25', '00:15'),
			place(3, '2027-02-26', '00:45')
		];
		expect(rulesOf(nightly, chain)).toEqual([[3, 'same-time']]);
	});

	it('weekday, holiday, past and earliest start', () => {
		const problem = makeProblem({
			plan: { ...PLAN, weekdays: [1, 2, 4, 5] },
			calendar: makeCalendar({ holidays: ['2027-02-25'] }),
			participant: makeParticipant({ earliestStartMs: at('2027-02-24', '09:00') }),
			nowMs: at('2027-02-23', '12:00')
		});
		expect(checkChain(problem, CHAIN)).toMatchObject([
			{ visitNumber: 1, rule: 'in-the-past', nowMs: at('2027-02-23', '12:00') },
			{ visitNumber: 1, rule: 'before-earliest-start' },
			{ visitNumber: 2, rule: 'weekday', weekday: 3, allowedWeekdays: [1, 2, 4, 5] },
			{ visitNumber: 3, rule: 'holiday', date: '2027-02-25' }
		]);
	});

	it('hours and busy times of rig, room and staff over set-up and clean-up', () => {
		const taken = { fromMs: at('2027-02-24', '12:05'), toMs: at('2027-02-24', '13:00') };
		const calendarWith = (part: Parameters<typeof makeCalendar>[0]) =>
			makeProblem({ plan: PLAN, calendar: makeCalendar(part) });
		const rig = { id: 'gull', roomId: 'east', hours: workingHours(9, 17), busy: [] };
		const staff = { id: 'rui', hours: workingHours(8, 18), busy: [] };
		const cases: [BookingProblem, RuleName][] = [
			[calendarWith({ rigs: [{ ...rig, hours: workingHours(11, 17) }] }), 'rig-hours'],
			[calendarWith({ rigs: [{ ...rig, busy: [taken] }] }), 'rig-busy'],
			[calendarWith({ rooms: [{ id: 'east', busy: [taken] }] }), 'room-busy'],
			[calendarWith({ staff: [{ ...staff, hours: workingHours(11, 18) }] }), 'staff-hours'],
			[calendarWith({ staff: [{ ...staff, busy: [taken] }] }), 'staff-busy']
		];
		for (const [problem, rule] of cases) {
			expect(rulesOf(problem, CHAIN)).toContainEqual([2, rule]);
		}
		// The person is free to leave: clean-up takes the rig, not them.
		const busyPerson = makeProblem({ plan: PLAN, participant: makeParticipant({ busy: [taken] }) });
		expect(checkChain(busyPerson, CHAIN)).toEqual([]);
	});

	it('a rig or staff member the lab no longer has is never open', () => {
		const chain = CHAIN.map((visit) => ({ ...visit, rigId: 'sold', staffId: 'left' }));
		expect(new Set(rulesOf(PROBLEM, chain).map(([, rule]) => rule))).toEqual(
			new Set(['rig-hours', 'staff-hours'])
		);
	});

	it('availability is read on the clock of the person', () => {
		// 11:00 in Lisbon is 06:00 in New York; after 14 March, 07:00.
		const window = { fromMinute: 360, toMinute: 420 };
		const availability = ([1, 2, 3, 4, 5] as const).map((weekday) => ({ weekday, ...window }));
		const participant = makeParticipant({ zone: 'America/New_York', availability });
		const problem = makeProblem({ plan: PLAN, participant });
		expect(checkChain(problem, CHAIN)).toEqual([]);
		const later = CHAIN.map((one) => ({ ...one, startMs: one.startMs + 21 * 24 * HOUR_MS }));
		expect(checkChain(problem, later)).toMatchObject([
			{ rule: 'availability', visitNumber: 1, zone: 'America/New_York' },
			{ rule: 'availability', visitNumber: 2 },
			{ rule: 'availability', visitNumber: 3 }
		]);
	});

	it('times the person named as impossible', () => {
		const busy = [{ fromMs: at('2027-02-24', '11:59'), toMs: at('2027-02-24', '13:00') }];
		const problem = makeProblem({ plan: PLAN, participant: makeParticipant({ busy }) });
		expect(rulesOf(problem, CHAIN)).toEqual([[2, 'person-busy']]);
	});
});

describe('what an hour means where clocks change', () => {
	const saturday = { ...place(1, '2027-03-27', '11:00'), fixed: true };
	const sunday = place(2, '2027-03-28', '11:00');
	const everyDay = (hoursMean: 'elapsed' | 'clock') => {
		const problem = withGap({ hoursMean, minHours: 24, maxHours: 24 });
		const plan = { ...problem.plan, weekdays: [1, 2, 3, 4, 5, 6, 7] as const };
		const hours = allWeek();
		const rigs = [{ id: 'gull', roomId: null, hours, busy: [] }];
		const calendar = makeCalendar({ rigs, staff: [{ id: 'rui', hours, busy: [] }] });
		return { ...problem, plan, calendar };
	};

	it('elapsed: same time tomorrow is 23 h later in spring', () => {
		expect(checkChain(everyDay('elapsed'), [saturday, sunday])).toMatchObject([
			{ rule: 'gap-too-short', gapHours: 23 }
		]);
	});

	it('clock: same time tomorrow is always 24 h later', () => {
		expect(checkChain(everyDay('clock'), [saturday, sunday])).toEqual([]);
	});
});

describe('fixed visits', () => {
	it('are not judged, but count for the gaps of others', () => {
		const over = CHAIN.map((visit) => ({ ...visit, fixed: visit.visitNumber < 3 }));
		const later = { ...PROBLEM, nowMs: at('2027-02-24', '18:00') };
		expect(checkChain(later, over)).toEqual([]);
		const moved = over.map((visit) =>
			visit.visitNumber === 3 ? { ...visit, startMs: at('2027-02-25', '15:30') } : visit
		);
		expect(rulesOf(later, moved)).toEqual([
			[3, 'gap-too-long'],
			[3, 'same-time']
		]);
	});

	it('name a rule that a moved earlier visit breaks towards them', () => {
		const chain = [
			place(1, '2027-02-22', '11:00'),
			{ ...place(2, '2027-02-24', '11:00'), fixed: true }
		];
		expect(rulesOf(PROBLEM, chain)).toEqual([[2, 'gap-too-long']]);
	});
});

describe("a caller's mistake", () => {
	it('throws for a visit that is not in the plan or stands twice', () => {
		expect(() => checkChain(PROBLEM, [place(9, '2027-02-23', '11:00')])).toThrow(RangeError);
		expect(() => checkChain(PROBLEM, [...CHAIN, place(3, '2027-02-25', '12:00')])).toThrow(
			RangeError
		);
	});
});

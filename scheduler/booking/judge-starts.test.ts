import { describe, expect, it } from 'vitest';
import { checkChain } from './check-chain.ts';
import { describeBrokenRule } from './describe-broken-rule.ts';
import { findAlternatives } from './find-alternatives.ts';
import { judgeMove, judgeStarts } from './judge-starts.ts';
import { HOUR_MS } from './local-date.ts';
import {
	at,
	makeCalendar,
	makeParticipant,
	makeProblem,
	makeStudyPlan,
	makeVisit,
	RETENTION_GAP,
	weeks,
	workingHours
} from '../../tests/support/booking/example-problem.ts';
import type { BookingProblem, PlacedVisit } from './types.ts';

// Six practice days and a retention day; day 1 on Fri 12 March, the pause over the weekend, Good
// Friday closed.
const PLAN = makeStudyPlan({
	visits: [
		...[1, 2, 3, 4, 5, 6].map((number) => makeVisit(number, { minutes: 45 })),
		makeVisit(7, { kind: 'retention', minutes: 45, gapBefore: RETENTION_GAP })
	]
});
const PROBLEM: BookingProblem = makeProblem({
	plan: PLAN,
	calendar: makeCalendar({ holidays: ['2027-03-26'] }),
	nowMs: at('2027-03-18', '13:00')
});
const CHAIN: PlacedVisit[] = [
	...['12', '15', '16', '17', '18'].map((day, index) => place(index + 1, day, '11:00', true)),
	place(6, '19', '11:00'),
	place(7, '25', '12:30')
];

function place(visitNumber: number, day: string, time: string, fixed = false): PlacedVisit {
	return {
		visitNumber,
		startMs: at(`2027-03-${day}`, time),
		rigId: 'heron',
		staffId: 'rui',
		fixed
	};
}

const TWO_WEEKS = { fromMs: at('2027-03-15', '00:00'), toMs: at('2027-03-27', '00:00') };
const WORDS = { zone: 'Europe/Lisbon', visits: PLAN.visits, names: new Map([['gull', 'Gull']]) };

describe('moving day 6 to Friday 14:00', () => {
	const move = judgeMove({
		problem: PROBLEM,
		chain: CHAIN,
		visitNumber: 6,
		startMs: at('2027-03-19', '14:00'),
		rigId: 'gull'
	});

	it('breaks the retention window, the own clock and the gap, in plain words', () => {
		if (move.ok) throw new Error('the move is allowed');
		expect(move.broken.map((one) => describeBrokenRule(one, WORDS).sentence)).toEqual([
			'Own clock. Day 6 would be 3 h off their 11:00; the limit is 2 h.',
			'Retention window. Day 7, Thu 25 March 12:30, would come 142.5 h later; the protocol wants 144 to 192 h.'
		]);
	});

	it('the latest allowed start that Friday is 12:30', () => {
		const friday = { fromMs: at('2027-03-19', '00:00'), toMs: at('2027-03-20', '00:00') };
		const starts = judgeStarts({ problem: PROBLEM, chain: CHAIN, visitNumber: 6, window: friday });
		const allowed = starts.flatMap(({ verdict, minute }) => (verdict.ok ? [minute] : []));
		expect(Math.max(...allowed)).toBe(12 * 60 + 30);
	});
});

describe('judged starts', () => {
	const starts = judgeStarts({ problem: PROBLEM, chain: CHAIN, visitNumber: 6, window: TWO_WEEKS });

	it('holds every quarter hour on every rig', () => {
		expect(starts).toHaveLength(2 * 12 * 96);
	});

	it('allowed starts keep the whole chain valid, the others break the rule they name', () => {
		expect(checkChain(PROBLEM, CHAIN)).toEqual([]);
		for (const { startMs, rigId, verdict } of starts) {
			if (startMs === null) throw new Error('no clocks change in these weeks');
			const staffId = verdict.ok ? verdict.staffId : 'rui';
			const moved = { visitNumber: 6, startMs, rigId, staffId };
			const chain = CHAIN.map((visit) => (visit.visitNumber === 6 ? moved : visit));
			const rules = checkChain(PROBLEM, chain).map(({ rule }) => rule);
			if (verdict.ok) expect(rules).toEqual([]);
			else expect(rules).toContain(verdict.broken.rule);
		}
	});

	it('every place that is not allowed has words for the grid', () => {
		const short = starts.flatMap(({ verdict }) =>
			verdict.ok ? [] : [describeBrokenRule(verdict.broken, WORDS).short]
		);
		expect(new Set(short)).toContain('night between');
		expect(new Set(short)).toContain('retention window');
		expect(new Set(short)).toContain('closed');
		expect(short.every((words) => words.length > 0)).toBe(true);
	});

	it('local times that the clocks jump over stand in their place, refused', () => {
		const sunday = { fromMs: at('2027-03-28', '00:00'), toMs: at('2027-03-29', '00:00') };
		const day = judgeStarts({ problem: PROBLEM, chain: CHAIN, visitNumber: 6, window: sunday });
		const onGull = day.filter(({ rigId }) => rigId === 'gull');
		expect(onGull.map(({ minute }) => minute)).toEqual(
			Array.from({ length: 96 }, (_, i) => i * 15)
		);
		const missing = onGull.filter(({ startMs }) => startMs === null);
		expect(missing.map(({ minute }) => minute)).toEqual([60, 75, 90, 105]);
		expect(missing[0]?.verdict).toMatchObject({ ok: false, broken: { rule: 'clock-change-gap' } });
	});

	it('an hour that comes twice is judged twice', () => {
		const sunday = { fromMs: at('2027-10-31', '00:00'), toMs: at('2027-11-01', '00:00') };
		const day = judgeStarts({ problem: PROBLEM, chain: CHAIN, visitNumber: 6, window: sunday });
		expect(day.filter(({ minute, rigId }) => minute === 75 && rigId === 'gull')).toHaveLength(2);
	});

	it('takes another member of staff when the one of the visit is taken', () => {
		const staff = [
			{ id: 'rui', hours: workingHours(8, 12), busy: [] },
			{ id: 'ana', hours: workingHours(8, 18), busy: [] }
		];
		const problem = { ...PROBLEM, calendar: { ...PROBLEM.calendar, staff } };
		const options = { problem, chain: CHAIN, visitNumber: 6, rigId: 'gull' };
		const staffAt = (time: string) => {
			const move = judgeMove({ ...options, startMs: at('2027-03-19', time) });
			return move.ok && move.visits.find(({ visitNumber }) => visitNumber === 6)?.staffId;
		};
		expect([staffAt('10:30'), staffAt('12:15')]).toEqual(['rui', 'ana']);
	});

	it('throws for a visit that the chain does not hold', () => {
		expect(() =>
			judgeStarts({ problem: PROBLEM, chain: [], visitNumber: 6, window: TWO_WEEKS })
		).toThrow(RangeError);
	});
});

describe('alternatives', () => {
	const busy = [{ fromMs: at('2027-03-19', '10:15'), toMs: at('2027-03-19', '12:00') }];
	const problem = { ...PROBLEM, participant: makeParticipant({ busy }) };
	const options = { problem, chain: CHAIN, visitNumber: 6, horizonEndMs: PROBLEM.nowMs + weeks(6) };

	it('keep every rule, fewest moved visits first, close to the wanted start', () => {
		const result = findAlternatives({ ...options, wantedStartMs: at('2027-03-19', '14:00') });
		if (!result.ok) throw new Error('no alternative');
		for (const { visits } of result.alternatives) expect(checkChain(problem, visits)).toEqual([]);
		const [first] = result.alternatives;
		// The person is free again at 12:00; 12:30 is the latest start that Friday.
		expect(first?.moved).toHaveLength(1);
		expect([
			at('2027-03-19', '12:00'),
			at('2027-03-19', '12:15'),
			at('2027-03-19', '12:30')
		]).toContain(first?.moved[0]?.toMs);
		const counts = result.alternatives.map(({ moved }) => moved.length);
		expect(counts).toEqual([...counts].sort((a, b) => a - b));
	});

	it('move one visit exactly when some judged start is allowed', () => {
		const closed = { ...problem.calendar, holidays: ['2027-03-26', '2027-03-19'] };
		for (const calendar of [problem.calendar, closed]) {
			const changed = { ...problem, calendar };
			const starts = judgeStarts({
				problem: changed,
				chain: CHAIN,
				visitNumber: 6,
				window: TWO_WEEKS
			});
			const isPossible = starts.some(({ verdict }) => verdict.ok);
			const result = findAlternatives({ ...options, problem: changed });
			const movesOne = result.ok && result.alternatives[0]?.moved.length === 1;
			expect(movesOne).toBe(isPossible);
		}
	});

	it('move later visits along when one move alone is not enough', () => {
		// The person cannot come on Thursday 25 before 13:00, so retention must go later or day 6 move.
		const chain = CHAIN.map((one) =>
			one.visitNumber === 7 ? { ...one, startMs: at('2027-03-25', '11:00') } : one
		);
		const late = [{ fromMs: at('2027-03-19', '08:00'), toMs: at('2027-03-19', '12:15') }];
		const later = { ...PROBLEM, participant: makeParticipant({ busy: late }) };
		const result = findAlternatives({ ...options, problem: later, chain });
		if (!result.ok) throw new Error('no alternative');
		const [first] = result.alternatives;
		expect(first?.moved.map(({ visitNumber }) => visitNumber)).toEqual([6, 7]);
		expect(checkChain(later, first?.visits ?? [])).toEqual([]);
	});

	it('say what stands in the way when there are none', () => {
		const away = [{ fromMs: problem.nowMs, toMs: problem.nowMs + 30 * 24 * HOUR_MS }];
		const gone = { ...problem, participant: makeParticipant({ busy: away }) };
		const result = findAlternatives({ ...options, problem: gone });
		expect(result).toMatchObject({ ok: false, reason: 'no-chain', obstacle: { visitNumber: 6 } });
		const rules = result.ok ? [] : result.obstacle.blockedBy.map(({ rule }) => rule);
		expect(rules).toContain('person-busy');
	});

	it('throw for a visit that may not be moved', () => {
		expect(() => findAlternatives({ ...options, visitNumber: 5 })).toThrow(RangeError);
	});
});

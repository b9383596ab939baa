import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { checkChain } from './check-chain.ts';
import { DRIFT_COST_PER_HOUR, PAUSE_COST } from './chain-search.ts';
import { findChains, type FindChainsResult } from './find-chains.ts';
import { circularMinutes, DAY_MS } from './local-date.ts';
import { classifyGap, hoursBetween } from './judge-gap.ts';
import { listEveryChain } from '../../tests/support/booking/every-chain.ts';
import {
	at,
	DAILY_GAP,
	makeCalendar,
	makeParticipant,
	makeProblem,
	makeStudyPlan,
	weeks,
	workingHours
} from '../../tests/support/booking/example-problem.ts';
import { RANDOM_HORIZON_MS, randomProblem } from '../../tests/support/booking/random-problem.ts';
import type { BookingProblem, PlacedVisit } from './types.ts';
import { findWhatWouldHelp } from './what-would-help.ts';
import { getZoneClock } from './zone-clock.ts';

function find(problem: BookingProblem, chainCount = 5): FindChainsResult {
	return findChains({ problem, horizonEndMs: problem.nowMs + weeks(8), chainCount });
}

function startsOf(result: FindChainsResult): number[] {
	if (!result.ok) throw new Error(`no chain: ${JSON.stringify(result.obstacle)}`);
	return result.chains[0]?.visits.map(({ startMs }) => startMs) ?? [];
}

/** The cost as the finder defines it, counted anew from the starts alone. */
function priceOf({ plan, calendar }: BookingProblem, chain: readonly PlacedVisit[]): number {
	const clock = getZoneClock(calendar.zone);
	const locals = chain.map(({ startMs }) => ({ startMs, ...clock.read(startMs) }));
	const [first] = locals;
	return locals.reduce((sum, local, index) => {
		const [before, rule] = [locals[index - 1], plan.visits[index]?.gapBefore];
		if (!before || !rule || !first) return sum;
		const hours = hoursBetween(rule, before, local);
		const isPause = classifyGap(rule, hours) === 'pause';
		const drift = circularMinutes(local.minute, first.minute) / 60;
		const hasTolerance = plan.clockWindow.sameTimeToleranceMinutes !== null;
		const gapCost = isPause ? PAUSE_COST : Math.abs(hours - rule.targetHours);
		return sum + gapCost + (hasTolerance ? drift * DRIFT_COST_PER_HOUR : 0);
	}, 0);
}

describe('finder and brute force agree', () => {
	it('on whether a chain exists, on the earliest day and on the cheapest chain of that day', () => {
		let [foundCount, noneCount] = [0, 0];
		const property = fc.property(randomProblem, (problem) => {
			const horizonEndMs = problem.nowMs + RANDOM_HORIZON_MS;
			const every = listEveryChain(problem, horizonEndMs);
			const result = findChains({ problem, horizonEndMs, chainCount: 3 });
			expect(result.ok).toBe(every.length > 0);
			if (!result.ok) {
				noneCount += 1;
				expect(result.obstacle.blockedBy.length).toBeGreaterThan(0);
				return;
			}
			foundCount += 1;
			for (const { visits } of result.chains) expect(checkChain(problem, visits)).toEqual([]);
			const dayOf = (chain: readonly PlacedVisit[]) =>
				getZoneClock(problem.calendar.zone).read(chain[0]?.startMs ?? 0).dayNumber;
			const best = result.chains[0];
			const earliestDay = Math.min(...every.map(dayOf));
			expect(dayOf(best?.visits ?? [])).toBe(earliestDay);
			const prices = every
				.filter((one) => dayOf(one) === earliestDay)
				.map((c) => priceOf(problem, c));
			expect(best?.cost.total).toBeCloseTo(Math.min(...prices), 9);
		});
		fc.assert(property, { seed: 31, numRuns: 60 });
		expect(foundCount).toBeGreaterThan(7);
		expect(noneCount).toBeGreaterThan(10);
	}, 60_000);
});

describe('the usual study: baseline, six practice days, retention', () => {
	it('starts on the first day at one clock time, with the one pause over the weekend', () => {
		const dates = ['02-22', '02-23', '02-24', '02-25', '02-26', '03-01', '03-02', '03-09'];
		const starts = startsOf(find(makeProblem()));
		expect(starts).toEqual(dates.map((date) => at(`2027-${date}`, '09:15')));
	});

	it('proposes distinct chains that all keep every rule', () => {
		const problem = makeProblem();
		const result = find(problem);
		if (!result.ok) throw new Error('no chain');
		expect(result.chains).toHaveLength(5);
		for (const { visits } of result.chains) expect(checkChain(problem, visits)).toEqual([]);
		expect(new Set(result.chains.map(({ visits }) => visits[0]?.startMs)).size).toBe(5);
	});

	it('a Tuesday and a Thursday closed leave no start before the Monday after', () => {
		// Seven daily visits with one pause begin on a Monday to Thursday; each such beginning up to
		// Thursday 4 March meets one of the two days.
		const calendar = makeCalendar({ holidays: ['2027-03-02', '2027-03-04'] });
		const [first] = startsOf(find(makeProblem({ calendar })));
		expect(first).toBe(at('2027-03-08', '09:15'));
	});

	it('crosses the change of clocks at the same clock time', () => {
		const problem = makeProblem({ nowMs: at('2027-03-22', '08:00') });
		const starts = startsOf(find(problem));
		const minutes = starts.map((ms) => getZoneClock('Europe/Lisbon').read(ms).minute);
		expect(starts[4]).toBe(at('2027-03-26', '09:15'));
		expect(starts[5]).toBe(at('2027-03-29', '09:15'));
		expect(new Set(minutes)).toEqual(new Set([555]));
	});

	it('keeps fixed visits and places the others around them', () => {
		const over = [1, 2, 3].map((visitNumber) => ({
			visitNumber,
			startMs: at(`2027-02-2${visitNumber + 1}`, '11:10'),
			rigId: 'gull',
			staffId: 'rui',
			fixed: true
		}));
		const problem = makeProblem({ nowMs: at('2027-02-24', '18:00') });
		const result = findChains({
			problem,
			fixed: over,
			horizonEndMs: problem.nowMs + weeks(4),
			chainCount: 2
		});
		if (!result.ok) throw new Error('no chain');
		const [best] = result.chains;
		expect(best?.visits.slice(0, 3)).toEqual(over);
		expect(best?.visits[3]?.startMs).toBe(at('2027-02-25', '11:15'));
		expect(checkChain(problem, best?.visits ?? [])).toEqual([]);
	});

	it('refuses to place anything when every visit is fixed', () => {
		const problem = makeProblem();
		const [chain] = [startsOf(find(problem))];
		const fixed = chain.map((startMs, index) => ({
			visitNumber: index + 1,
			startMs,
			rigId: 'gull',
			staffId: 'rui'
		}));
		const options = { problem, fixed, horizonEndMs: problem.nowMs + weeks(8), chainCount: 1 };
		expect(() => findChains(options)).toThrow(RangeError);
	});

	it('answers within 300 ms of computing for eight visits in eight weeks', () => {
		const spans = [0, 1, 2, 3, 4].map((day) => {
			const problem = makeProblem({ nowMs: at('2027-02-22', '08:00') + day * DAY_MS });
			const before = process.cpuUsage();
			expect(find(problem).ok).toBe(true);
			return process.cpuUsage(before).user / 1000;
		});
		// The median: the first run also compiles the code.
		expect(spans.sort((a, b) => a - b)[2]).toBeLessThan(300);
	});
});

// Twenty seconds: what would help is searched for once for each rule, on machines under any load.
describe('when no chain keeps every rule', { timeout: 20_000 }, () => {
	it('a Monday, Wednesday and Friday person cannot follow a daily gap', () => {
		const days = workingHours(9, 17).filter(({ weekday }) => [1, 3, 5].includes(weekday));
		const participant = makeParticipant({ availability: days });
		const result = find(makeProblem({ participant }));
		expect(result).toMatchObject({ ok: false, reason: 'no-chain', obstacle: { visitNumber: 3 } });
		const rules = result.ok ? [] : result.obstacle.blockedBy.map(({ rule }) => rule);
		expect(rules).toContain('availability');
		expect(rules).toContain('pause-used-up');
		const problem = makeProblem({ participant });
		const options = { problem, horizonEndMs: problem.nowMs + weeks(8) };
		expect(findWhatWouldHelp(options)).toEqual(['availability']);
	});

	it('without staff the first visit has no place, and staff hours are the reason', () => {
		const result = find(makeProblem({ calendar: makeCalendar({ staff: [] }) }));
		expect(result).toMatchObject({
			ok: false,
			obstacle: { visitNumber: 1, lastReachedStartMs: null }
		});
		const rules = result.ok ? [] : result.obstacle.blockedBy.map(({ rule }) => rule);
		expect(rules).toContain('staff-hours');
	});

	it('a search that ends too soon says so', () => {
		const problem = makeProblem();
		const result = findChains({ problem, horizonEndMs: problem.nowMs + weeks(1), chainCount: 1 });
		const [most] = result.ok ? [] : result.obstacle.blockedBy;
		expect(most?.rule).toBe('horizon');
	});

	it('weekends closed and no pause allowed leave no six days in a row', () => {
		const plan = makeStudyPlan();
		const strict = { ...DAILY_GAP, allowedPauses: { ...DAILY_GAP.allowedPauses, count: 0 } };
		const visits = plan.visits.map((visit) =>
			visit.kind === 'practice' ? { ...visit, gapBefore: strict } : visit
		);
		const result = find(makeProblem({ plan: { ...plan, visits } }));
		expect(result).toMatchObject({ ok: false, obstacle: { visitNumber: 6 } });
		const problem = makeProblem({ plan: { ...plan, visits } });
		const options = { problem, horizonEndMs: problem.nowMs + weeks(8) };
		expect(findWhatWouldHelp(options)).toEqual(['pause-used-up']);
	});

	it('nothing that would help is named when every rule alone leaves no chain', () => {
		const calendar = makeCalendar({ staff: [], rigs: [] });
		const problem = makeProblem({ calendar });
		expect(findWhatWouldHelp({ problem, horizonEndMs: problem.nowMs + weeks(8) })).toEqual([]);
	});
});

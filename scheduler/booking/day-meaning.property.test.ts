import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { checkChain } from './check-chain.ts';
import { measureGapHours } from './check-gap.ts';
import { classifyGap, hoursBetween, listGapSpans } from './judge-gap.ts';
import { DAY_MS, HOUR_MS } from './local-date.ts';
import type { BookingProblem, GapRule, WeeklyWindow } from './types.ts';
import { getZoneClock } from './zone-clock.ts';

/** Changes by an hour in both halves of the world, by half an hour, at midnight, and none. */
const zones = [
	'Europe/Berlin',
	'Europe/Lisbon',
	'America/New_York',
	'America/Santiago',
	'Australia/Lord_Howe',
	'Pacific/Chatham',
	'Asia/Beirut',
	'Asia/Tokyo'
];
const from = Date.UTC(2026, 0, 1);
const to = Date.UTC(2029, 0, 1);

/** Instants at which the clock of a zone changes. */
function listChanges(zone: string): number[] {
	const segments = getZoneClock(zone).listSegments(from, to);
	const apart = segments.filter(
		(segment, index) => index > 0 && segment.offsetMs !== segments[index - 1]?.offsetMs
	);
	return apart.map(({ fromMs }) => fromMs);
}

/** Two starts of which the first lies up to two days before a change of the clocks, or anywhere. */
const twoStarts = fc
	.record({
		zone: fc.constantFrom(...zones),
		pick: fc.nat(),
		beforeMinutes: fc.integer({ min: 0, max: 2 * 1440 }),
		days: fc.integer({ min: 1, max: 7 }),
		minutesLater: fc.integer({ min: -300, max: 300 })
	})
	.map(({ zone, pick, beforeMinutes, days, minutesLater }) => {
		const changes = listChanges(zone);
		const change = changes.length > 0 ? changes[pick % changes.length] : undefined;
		const anchor = change ?? from + (pick % 900) * DAY_MS;
		const earlierMs = anchor - beforeMinutes * 60_000;
		return { zone, earlierMs, laterMs: earlierMs + days * DAY_MS + minutesLater * 60_000 };
	});

const gap = (hoursMean: 'elapsed' | 'clock', hours: number): GapRule => ({
	...{ minHours: hours, targetHours: hours, maxHours: hours, nightsBetween: 0, hoursMean },
	allowedPauses: { count: 0, minHours: 0, maxHours: 0 }
});

function startAt(zone: string, startMs: number) {
	return { startMs, ...getZoneClock(zone).read(startMs) };
}

const always: WeeklyWindow[] = ([1, 2, 3, 4, 5, 6, 7] as const).map((weekday) => ({
	...{ weekday, fromMinute: 0, toMinute: 1440 }
}));

/** A lab that is always open, with two visits that follow by one gap. */
function problemOf(zone: string, gapBefore: GapRule): BookingProblem {
	const visit = {
		label: '',
		kind: 'practice' as const,
		minutes: 1,
		setupMinutes: 0,
		cleanupMinutes: 0
	};
	return {
		plan: {
			visits: [
				{ ...visit, number: 1, gapBefore: null },
				{ ...visit, number: 2, gapBefore }
			],
			clockWindow: { earliestMinute: 0, latestMinute: 1439, sameTimeToleranceMinutes: null },
			weekdays: [1, 2, 3, 4, 5, 6, 7]
		},
		calendar: {
			...{ zone, holidays: [], rooms: [] },
			rigs: [{ id: 'rig', roomId: null, hours: always, busy: [] }],
			staff: [{ id: 'staff', hours: always, busy: [] }]
		},
		participant: { zone, availability: null, busy: [], earliestStartMs: null },
		nowMs: from - 10 * DAY_MS
	};
}

function brokenRules(zone: string, rule: GapRule, starts: readonly number[]): string[] {
	const chain = starts.map((startMs, index) => ({
		...{ visitNumber: index + 1, startMs, rigId: 'rig', staffId: 'staff' }
	}));
	return checkChain(problemOf(zone, rule), chain).map((broken) => broken.rule);
}

describe('what an hour between visits means over a change of the clocks', () => {
	it('is looked at where clocks change', () => {
		expect(zones.map((zone) => listChanges(zone).length > 0)).toEqual([
			...[true, true, true, true, true, true, true, false]
		]);
	});

	it('elapsed: the hours that pass, whatever the clock shows', () => {
		fc.assert(
			fc.property(twoStarts, ({ zone, earlierMs, laterMs }) => {
				const hours = measureGapHours({ zone }, gap('elapsed', 24), earlierMs, laterMs);
				expect(hours).toBe((laterMs - earlierMs) / HOUR_MS);
				expect(brokenRules(zone, gap('elapsed', hours), [earlierMs, laterMs])).toEqual([]);
			})
		);
	});

	it('by the clock: days of 24 h and the difference of the clock times', () => {
		fc.assert(
			fc.property(twoStarts, ({ zone, earlierMs, laterMs }) => {
				const clock = getZoneClock(zone);
				const [a, b] = [clock.read(earlierMs), clock.read(laterMs)];
				const hours = measureGapHours({ zone }, gap('clock', 24), earlierMs, laterMs);
				expect(hours).toBeCloseTo((b.dayNumber - a.dayNumber) * 24 + (b.minute - a.minute) / 60, 9);
			})
		);
	});

	it('by the clock: the same time on a later day keeps its gap, and elapsed hours show the change', () => {
		fc.assert(
			fc.property(twoStarts, fc.integer({ min: 1, max: 7 }), ({ zone, earlierMs }, days) => {
				const clock = getZoneClock(zone);
				const start = clock.read(earlierMs);
				const [laterMs] = clock.findInstants({ ...start, dayNumber: start.dayNumber + days });
				// In the hour that a change leaves out there is no such time.
				fc.pre(laterMs !== undefined && clock.findInstants(start).length === 1);
				const starts = [earlierMs, laterMs ?? earlierMs];
				expect(brokenRules(zone, gap('clock', days * 24), starts)).toEqual([]);
				const moved = clock.offsetMs(laterMs ?? 0) - clock.offsetMs(earlierMs);
				const broken = brokenRules(zone, gap('elapsed', days * 24), starts);
				const isShort = moved > 0 ? 'gap-too-short' : 'gap-too-long';
				expect(broken).toEqual(moved === 0 ? [] : [isShort]);
			})
		);
	});

	it('is measured alike by the finder and by the checker, and no gap within is overlooked', () => {
		fc.assert(
			fc.property(
				twoStarts,
				fc.constantFrom('elapsed' as const, 'clock' as const),
				({ zone, earlierMs, laterMs }, meaning) => {
					const checked = measureGapHours({ zone }, gap(meaning, 24), earlierMs, laterMs);
					const rule = { ...gap(meaning, 24), minHours: checked - 0.01, maxHours: checked + 0.01 };
					const [a, b] = [startAt(zone, earlierMs), startAt(zone, laterMs)];
					expect(hoursBetween(rule, a, b)).toBeCloseTo(checked, 9);
					expect(classifyGap(rule, hoursBetween(rule, a, b))).toBe('within');
					const elapsed = laterMs - earlierMs;
					const isSeen = listGapSpans(rule, false).some(
						({ fromMs, toMs }) => elapsed >= fromMs && elapsed < toMs
					);
					expect(isSeen).toBe(true);
				}
			)
		);
	});
});

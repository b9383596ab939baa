import fc from 'fast-check';
import { DAY_MS, HOUR_MS } from '$scheduler/booking/local-date.ts';
import type {
	BookingProblem,
	GapRule,
	Interval,
	Weekday,
	WeeklyWindow
} from '$scheduler/booking/types.ts';
import { at, makeVisit } from './example-problem.ts';

/** How long after its beginning a random problem's search ends. */
export const RANDOM_HORIZON_MS = 6 * DAY_MS;

const ZONES = ['Europe/Lisbon', 'America/New_York', 'Australia/Lord_Howe', 'Asia/Kathmandu'];

/** Weeks in 2027 with and without a change of clocks in these zones. */
const MONDAYS = [
	'2027-03-08',
	'2027-03-25',
	'2027-04-01',
	'2027-06-14',
	'2027-10-28',
	'2027-11-04'
];

const gapRule: fc.Arbitrary<GapRule> = fc
	.record({
		minHours: fc.constantFrom(4, 12, 20, 22.5),
		width: fc.constantFrom(0, 2, 8),
		nightsBetween: fc.constantFrom(0, 1),
		pauseCount: fc.constantFrom(0, 1, 2),
		pauseMinHours: fc.constantFrom(26, 44, 68),
		hoursMean: fc.constantFrom('elapsed' as const, 'clock' as const)
	})
	.map(({ minHours, width, nightsBetween, pauseCount, pauseMinHours, hoursMean }) => ({
		minHours,
		targetHours: minHours + width / 2,
		maxHours: minHours + width,
		nightsBetween,
		allowedPauses: { count: pauseCount, minHours: pauseMinHours, maxHours: pauseMinHours + 5 },
		hoursMean
	}));

/** Short windows on some weekdays, so that all chains can be listed. */
const weeklyHours: fc.Arbitrary<WeeklyWindow[]> = fc
	.record({
		weekdays: fc.subarray<Weekday>([1, 2, 3, 4, 5, 6, 7], { minLength: 3 }),
		fromSlot: fc.constantFrom(0, 1, 34, 36, 37, 88),
		slots: fc.integer({ min: 6, max: 8 })
	})
	.map(({ weekdays, fromSlot, slots }) =>
		weekdays.map((weekday) => ({
			weekday,
			fromMinute: fromSlot * 15,
			toMinute: Math.min(1440, (fromSlot + slots) * 15)
		}))
	);

const allWeek: WeeklyWindow[] = ([1, 2, 3, 4, 5, 6, 7] as const).map((weekday) => ({
	weekday,
	fromMinute: 0,
	toMinute: 1440
}));

function busyTimes(nowMs: number): fc.Arbitrary<Interval[]> {
	const interval = fc
		.tuple(fc.integer({ min: 0, max: 140 }), fc.integer({ min: 1, max: 3 }))
		.map(([hour, length]) => ({
			fromMs: nowMs + hour * HOUR_MS,
			toMs: nowMs + (hour + length) * HOUR_MS
		}));
	return fc.array(interval, { maxLength: 4 });
}

/** Two or three visits on one or two rigs within six days. */
export const randomProblem: fc.Arbitrary<BookingProblem> = fc
	.tuple(fc.constantFrom(...ZONES), fc.constantFrom(...MONDAYS))
	.chain(([zone, date]) => {
		const nowMs = at(date, '05:00', zone);
		const rig = fc.record({
			roomId: fc.constantFrom('one', 'two', null),
			hours: weeklyHours,
			busy: busyTimes(nowMs)
		});
		return fc
			.record({
				gaps: fc.array(gapRule, { minLength: 1, maxLength: 2 }),
				tolerance: fc.constantFrom(null, 0, 30, 60),
				window: fc.constantFrom([0, 1439], [540, 1020], [1320, 60]),
				weekdays: fc.subarray<Weekday>([1, 2, 3, 4, 5, 6, 7], { minLength: 5 }),
				rigs: fc.array(rig, { minLength: 1, maxLength: 2 }),
				roomBusy: busyTimes(nowMs),
				staffBusy: busyTimes(nowMs),
				personBusy: busyTimes(nowMs),
				personZone: fc.constantFrom(zone, 'Europe/Berlin'),
				availability: fc.constantFrom(null, allWeek, allWeek.slice(0, 5))
			})
			.map((part): BookingProblem => {
				const [earliestMinute = 0, latestMinute = 0] = part.window;
				const first = makeVisit(1, { minutes: 45 });
				const more = part.gaps.map((gapBefore, index) =>
					makeVisit(index + 2, { gapBefore, minutes: 30 + 15 * index })
				);
				return {
					plan: {
						visits: [first, ...more],
						clockWindow: {
							earliestMinute,
							latestMinute,
							sameTimeToleranceMinutes: part.tolerance
						},
						weekdays: part.weekdays
					},
					calendar: {
						zone,
						holidays: [],
						rigs: part.rigs.map((one, index) => ({ id: `rig${index}`, ...one })),
						rooms: [
							{ id: 'one', busy: part.roomBusy },
							{ id: 'two', busy: [] }
						],
						staff: [{ id: 'ana', hours: allWeek, busy: part.staffBusy }]
					},
					participant: {
						zone: part.personZone,
						availability: part.availability,
						busy: part.personBusy,
						earliestStartMs: null
					},
					nowMs
				};
			});
	});

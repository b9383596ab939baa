import { describe, expect, it } from 'vitest';
import { protocolContentSchema, type ProtocolContent } from '../../protocol/protocol-content.ts';
import { COURSE_TASK } from '../../simulation/course-groups.ts';
import type { WeeklyWindow } from '../../booking/types.ts';
import { runDry, walkDry } from './run-dry.ts';
import { drySettingsSchema, type DryLab, type DrySettings } from './dry-settings.ts';

const hours: WeeklyWindow[] = ([1, 2, 3, 4, 5] as const).map((weekday) => ({
	...{ weekday, fromMinute: 450, toMinute: 1200 }
}));
const lab: DryLab = {
	...{ zone: 'Europe/Lisbon', holidays: ['2027-02-09'] },
	rigs: [
		{ id: 'gull', roomId: 'a', hours },
		{ id: 'heron', roomId: 'b', hours }
	],
	staff: [
		{ id: 'one', hours },
		{ id: 'two', hours }
	]
};
const fixedArm = { key: 'fixed', name: 'Fixed', rule: 'fixed' } as const;
const daily = { minHours: 20, targetHours: 24, maxHours: 28, nightsBetween: 1 };

function content(change: Partial<ProtocolContent> = {}, days = 2): ProtocolContent {
	const visit = (
		number: number,
		label: string,
		kind: string,
		purpose: string,
		gap: object | null
	) => ({
		...{ number, label, kind, minutes: 45, setupMinutes: 10, cleanupMinutes: 5, gapBefore: gap },
		blocks: [1, 2].map((block) => ({ number: block, purpose, trials: 60 }))
	});
	return protocolContentSchema.parse({
		format: 1,
		task: COURSE_TASK,
		arms: [
			{ key: 'adaptive', name: 'Adaptive', rule: 'adaptive' },
			{ key: 'yoked', name: 'Yoked', rule: 'yoked', master: 'adaptive' },
			{ key: 'fixed', name: 'Fixed', rule: 'fixed' }
		],
		visits: [
			visit(1, 'Baseline', 'baseline', 'baseline', null),
			...Array.from({ length: days }, (_, i) =>
				visit(
					i + 2,
					`Day ${i + 1}`,
					'practice',
					'adaptive',
					i === 0 ? { ...daily, maxHours: 336, targetHours: 72 } : daily
				)
			),
			visit(days + 2, 'Retention', 'retention', 'retention', {
				...{ minHours: 144, targetHours: 168, maxHours: 192, nightsBetween: 6 }
			})
		],
		booking: {
			...{ earliestMinute: 480, latestMinute: 1080, sameTimeToleranceMinutes: 120 },
			weekdays: [1, 2, 3, 4, 5],
			pauses: { count: 1, minHours: 68, maxHours: 100 }
		},
		policy: { aims: { region: { share: 1, escapes: 3 } }, place: { pointCount: 128 } },
		guardRails: { automaticCoverMax: 0.5, automaticReachSdMax: 4, fallback: 'practice' },
		...{ readyLeadHours: 3, invitationDelayHours: 12, earliestStartHours: { min: 12, max: 36 } },
		comparison: null,
		limits: { minutesPerVisit: 90, trialsPerVisit: 300 },
		...{ consentTextVersion: '1', variants: [], trialSeconds: 8 },
		missedDay: { rule: 'shift-chain', withinHours: 48, mostMissed: 2 },
		...change
	});
}

const settings = (change: Partial<DrySettings> = {}): DrySettings =>
	drySettingsSchema.parse({
		...{ people: 3, seed: 4, startMs: Date.UTC(2027, 0, 11, 8), arrivalsPerWeek: 6 },
		...{ missShare: 0, dropShare: 0, ...change }
	});

describe('a dry run', { timeout: 120_000 }, () => {
	it('walks everybody through a sound protocol without a dead end', () => {
		const { people, deadEnds, rigHours } = runDry({
			content: content(),
			lab,
			settings: settings()
		});
		expect(deadEnds).toEqual([]);
		expect(people.map(({ end }) => end)).toEqual(Array.from({ length: 3 }, () => 'finished'));
		expect(people.every(({ visits }) => visits.length === 4)).toBe(true);
		// Four visits of an hour each.
		expect(rigHours).toBeCloseTo(3 * 4, 6);
	});

	it('gives a partner the kinds of the master’s blocks, and plain practice to the fixed arm', () => {
		const { people } = runDry({ content: content(), lab, settings: settings() });
		const kindsOf = (code: string | null) =>
			people.find((person) => person.code === code)?.visits.flatMap(({ kinds }) => kinds);
		const yoked = people.filter(({ arm }) => arm === 'yoked');
		expect(yoked).toHaveLength(1);
		for (const { code, master } of yoked) expect(kindsOf(code)).toEqual(kindsOf(master));
		const fixed = people.find(({ arm }) => arm === 'fixed');
		expect(fixed?.visits[1]?.kinds).toEqual(['practice', 'practice']);
	});

	it('is the same for the same seed, and another for another', () => {
		const chance = { missShare: 0.2, dropShare: 0.05 };
		const run = (seed: number) =>
			runDry({ content: content(), lab, settings: settings({ ...chance, seed }) });
		expect(run(9)).toEqual(run(9));
		expect(run(10)).not.toEqual(run(9));
	});

	it('finds a weekend that a chain of daily visits cannot cross, with the remedy', () => {
		const blocked = content(
			{
				booking: { ...content().booking, pauses: { count: 0, minHours: 68, maxHours: 100 } },
				arms: [fixedArm]
			},
			6
		);
		const { people, deadEnds } = runDry({
			content: blocked,
			lab,
			settings: settings({ people: 1 })
		});
		expect(people[0]?.end).toBe('not-booked');
		expect(deadEnds).toMatchObject([{ code: 'no-chain', person: 'D01', visit: 7 }]);
		expect(deadEnds[0]?.text).toMatch(/^Day 6 finds no place/);
		expect(deadEnds[0]?.remedy).toMatch(/one more longer gap|more weekdays/i);
	});

	it('finds partners whose master is behind', () => {
		const early = content({ yoking: { leadHours: 0, orphan: 'plain-practice', late: 'wait' } });
		const found = runDry({
			content: early,
			lab,
			settings: settings({ people: 6, arrivalsPerWeek: 40 })
		});
		expect(found.deadEnds.map(({ code }) => code)).toContain('master-behind');
		expect(found.deadEnds.find(({ code }) => code === 'master-behind')?.arm).toBe('yoked');
	});

	it('finds a day that is full before its blocks are run', () => {
		const full = content({ policy: { ...content().policy, limits: { trialsPerDay: 100 } } });
		const { deadEnds } = runDry({ content: full, lab, settings: settings({ people: 3 }) });
		expect(deadEnds.map(({ code }) => code)).toContain('day-full');
	});

	it('finds that a missed day has no rule, and that a make-up comes too late', () => {
		const { missedDay: _, ...silent } = content({ arms: [fixedArm] });
		const often = settings({ missShare: 0.5, people: 3 });
		const nothing = runDry({ content: silent, lab, settings: often });
		expect(nothing.deadEnds.map(({ code }) => code)).toContain('nothing-declared');
		const hasty = content({
			arms: [fixedArm],
			missedDay: { rule: 'make-up', withinHours: 0, mostMissed: 9 }
		});
		const late = runDry({ content: hasty, lab, settings: often });
		expect(late.deadEnds.map(({ code }) => code)).toContain('no-rebooking');
	});

	it('lets people stop practice and keeps their retention', () => {
		const stop = content({
			arms: [fixedArm],
			missedDay: { rule: 'stop-practice', withinHours: 0, mostMissed: 0 }
		});
		const { people } = runDry({
			...{ content: stop, lab },
			settings: settings({ missShare: 0.3, people: 6, seed: 2 })
		});
		const stopped = people.filter(({ end }) => end === 'stopped-practice');
		expect(stopped.length).toBeGreaterThan(0);
		const last = stopped[0]?.visits.at(-1);
		expect([last?.number, last?.kinds]).toEqual([4, ['retention', 'retention']]);
	});

	it('tells how far it has come', () => {
		const walk = walkDry({ content: content(), lab, settings: settings({ people: 2 }) });
		expect([walk.next().value, walk.next().value]).toEqual([
			{ done: 1, people: 2 },
			{ done: 2, people: 2 }
		]);
		expect(walk.next().done).toBe(true);
	});
});

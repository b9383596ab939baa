import { beforeAll, describe, expect, it } from 'vitest';
import { PUCK_RECORD } from '../policies/planted-trials.test-data.ts';
import { simulateOne, simulateStudy, type StudyReport } from './simulate-study.ts';
import { studySettingsSchema } from './simulation-settings.ts';

const rate = (b: number, retention = 1) => ({ kind: 'single-rate' as const, retention, rate: b });
const LONG = { motorAlong: 0.9, motorAcross: 0.35 };
const study = studySettingsSchema.parse({
	task: PUCK_RECORD,
	protocol: {
		aims: { region: { share: 0.5, escapes: 3 }, shift: { share: 0.5, goal: 5 } },
		place: { pointCount: 256 }
	},
	seed: 3,
	groups: [
		{ name: 'exploring', count: 4, traits: { ...LONG, exploration: 0.5, adaptation: rate(0.2) } },
		{ name: 'rigid', count: 4, traits: { ...LONG, exploration: 0.02, adaptation: rate(0.2) } },
		{ name: 'not adapting', count: 4, traits: { ...LONG, exploration: 0.02, adaptation: rate(0) } },
		{
			...{ name: 'still improving', count: 4 },
			traits: { ...LONG, noviceFactor: 3, learningTrials: 300, adaptation: rate(0.11) }
		}
	]
});

describe('a simulated study', () => {
	let report: StudyReport;
	const group = (name: string) => {
		const found = report.groups.find((candidate) => candidate.name === name);
		if (!found) throw new Error(name);
		return found;
	};
	beforeAll(() => (report = simulateStudy(study)), 60_000);

	it('gives people who explore escapes, and those who do not none', () => {
		expect(group('exploring').escapesMean).toBeGreaterThan(1);
		expect(group('rigid').escapesMean).toBe(0);
	});

	it('lets those who adapt hold the shift and freezes it for those who do not', () => {
		expect(group('rigid').heldShare).toBe(1);
		expect(group('not adapting')).toMatchObject({ heldShare: 0, frozenShare: 1 });
	});

	it('keeps those who still improve longer at practice', () => {
		const first = (sequence: string) => sequence.search(/[RS]/);
		const mean = (name: string) =>
			group(name).sequences.reduce((sum, sequence) => sum + first(sequence), 0) / 4;
		expect(mean('still improving')).toBeGreaterThan(mean('rigid') + 1);
		expect(group('still improving').lastError).toBeLessThan(
			0.7 * (group('still improving').firstError ?? 0)
		);
	});

	it('gives no two kinds of people the same course, and nobody practice alone', () => {
		const courses = report.groups.map(({ sequences }) => sequences[0]);
		expect(new Set(courses).size).toBe(courses.length);
		for (const { sequences } of report.groups)
			for (const sequence of sequences) expect(sequence).toMatch(/[RS]/);
	});

	it('never finds the levels of a rig unlike the replay', () => {
		const codes = report.people.flatMap(({ decisions }) => decisions.map(({ code }) => code));
		expect(codes).toContain('CONTINUE-SHIFT');
		expect(codes).not.toContain('TRACE');
	});

	it('gives each person the same course whoever computes it, in whatever order', () => {
		const [groupOfFive] = study.groups.slice(1);
		if (!groupOfFive) throw new Error('no group');
		const alone = simulateOne(study, groupOfFive, 5);
		const { group: _group, ...inStudy } = report.people[5] ?? { group: '' };
		expect(alone).toEqual(inStudy);
	});
});

import { describe, expect, it } from 'vitest';
import { policySettingsSchema } from '../policies/policy-settings.ts';
import { createTask } from '../tasks/create-task.ts';
import { taskRecordSchema } from '../tasks/task-record.ts';
import { redundantTraitsSchema } from '../learners/redundant-traits.ts';
import { COURSE_TASK } from './course-groups.ts';
import { measureEscape } from './region-escape.ts';
import { measureSteadiness } from './selector-steadiness.ts';
import { measureShift, SHIFT_LEARNERS, type ShiftLearner } from './shift-characteristics.ts';

/** Small runs of what scripts/calibrate-policies.mjs measures; the limits leave three standard errors. */
const task = createTask(taskRecordSchema.parse(COURSE_TASK));
const learner = (name: string): ShiftLearner => {
	const found = SHIFT_LEARNERS.find((candidate) => candidate.name === name);
	if (!found) throw new Error(name);
	return found;
};

describe('the shift rule', { timeout: 60_000 }, () => {
	const run = { peopleCount: 300, seed: 900, lagOne: 0 };

	it('lets at most one in ten of those who do not adapt pass its first step', () => {
		const got = measureShift({ ...run, learner: learner('does not adapt') });
		// .10 and three standard errors of .017.
		expect(got.passedShare).toBeLessThan(0.152);
		expect(got).toMatchObject({ heldShare: 0, frozenShare: 1 });
	});

	it('brings people who follow in twenty trials to the goal', () => {
		const got = measureShift({ ...run, learner: learner('a = .99, b = .11') });
		expect(got.heldShare).toBeGreaterThan(0.95);
		expect(got.heldTrials).toBeGreaterThanOrEqual(68);
		expect(got.heldTrials).toBeLessThanOrEqual(100);
	});

	it('is slower and stricter where a rig keeps the level within a block', () => {
		const options = { settings: { granularity: 'block' as const }, trialsMax: 600 };
		const got = measureShift({ ...run, ...options, learner: learner('a = 1, b = .2') });
		expect(got).toMatchObject({ passedTrials: 60, heldTrials: 300 });
		const none = measureShift({ ...run, ...options, learner: learner('does not adapt') });
		expect(none.passedShare).toBeLessThan(0.05);
	});
});

describe('the selector', { timeout: 120_000 }, () => {
	const run = {
		...{ task, settings: policySettingsSchema.parse({ place: { pointCount: 256 } }) },
		...{ peopleCount: 12, blockCount: 12, seed: 70 }
	};
	const people = { along: 1, across: 0.35, wanderSd: 0, lagOne: 0 };

	it('keeps its offer for people who do not change, also with correlated trials', () => {
		for (const lagOne of [0, 0.3]) {
			const got = measureSteadiness({ ...run, people: { ...people, lagOne, change: null } });
			expect(got.blockCount).toBeGreaterThan(80);
			// .05 and three standard errors of about .023.
			expect(got.changedShare).toBeLessThan(0.12);
		}
	});

	it('sees a cloud half as wide again within two blocks', () => {
		const change = { block: 7, spread: 1.5, moveSd: 0 };
		const got = measureSteadiness({ ...run, blockCount: 9, people: { ...people, change } });
		expect(got.confirmedShare).toBeGreaterThan(0.75);
	});
});

describe('a region', () => {
	const measure = (exploration: number, share: number) =>
		measureEscape({
			...{ task, share, peopleCount: 40, seed: 5 },
			traits: redundantTraitsSchema.parse({
				...{ motorAlong: 0.9, motorAcross: 0.35, exploration, rewardRate: 1 },
				adaptation: { kind: 'single-rate', retention: 1, rate: 0.3 }
			})
		}).successShare;

	it('is left by people who explore, the sooner the less it catches', () => {
		const [hard, easy] = [measure(0.3, 0.95), measure(0.3, 0.7)];
		expect(easy).toBeGreaterThan(hard + 0.15);
		expect(measure(0.6, 0.8)).toBeGreaterThan(0.75);
	});

	it('leaves people who do not explore with the success that leaks out', () => {
		expect(measure(0, 0.8)).toBeLessThan(0.3);
	});
});

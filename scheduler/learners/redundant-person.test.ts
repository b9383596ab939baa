import { describe, expect, it } from 'vitest';
import { createSeededStream } from '../random/seeded-stream.ts';
import { createTask } from '../tasks/create-task.ts';
import { createScaledTask } from '../tasks/scaled-task.ts';
import { taskRecordSchema } from '../tasks/task-record.ts';
import {
	restRedundantPerson,
	runRedundantTrial,
	startRedundantPerson,
	type RedundantState,
	type TrialConditions
} from './redundant-person.ts';
import { redundantTraitsSchema, type RedundantTraitsInput } from './redundant-traits.ts';
import { simulateSingleRate } from './single-rate.ts';

const forces = createScaledTask(
	createTask(
		taskRecordSchema.parse({
			...{ type: 'linear', coef: [1, 1], target: 20, tolerance: 1, resultUnit: 'N' },
			variables: ['a', 'b'].map((name) => ({
				...{ name, unit: 'N', min: 0, max: 20, origin: 10, scale: 1 }
			}))
		})
	)
);
const arm = createScaledTask(createTask(taskRecordSchema.parse({ type: 'arm-endpoint' })));
const PLAIN: TrialConditions = { shift: 0, isPenalized: () => false, feedback: 'shown' };
const QUIET = { motorAlong: 1e-9, motorAcross: 1e-9, exploration: 0 };

function run(
	given: RedundantTraitsInput,
	count: number,
	{
		task = forces,
		conditions = PLAIN,
		seed = 5
	}: { task?: typeof forces; conditions?: TrialConditions; seed?: number } = {}
) {
	const traits = redundantTraitsSchema.parse(given);
	const stream = createSeededStream(seed);
	let state: RedundantState = startRedundantPerson(
		task,
		Array.from({ length: task.variableCount }, () => 0)
	);
	const outcomes = Array.from({ length: count }, () => {
		const ran = runRedundantTrial({ task, traits, state, conditions, stream });
		({ state } = ran);
		return ran.outcome;
	});
	return { outcomes, state, traits };
}

const sdOf = (values: number[]) => {
	const mean = values.reduce((sum, value) => sum + value, 0) / values.length;
	return Math.sqrt(values.reduce((sum, value) => sum + (value - mean) ** 2, 0) / values.length);
};

describe('a model learner with more ways than results', () => {
	it('follows a shifted target as the learner with one rate does', () => {
		const adaptation = { kind: 'single-rate' as const, retention: 0.98, rate: 0.15 };
		const { outcomes } = run({ ...QUIET, adaptation }, 40, {
			conditions: { ...PLAIN, shift: 2 }
		});
		const { errors } = simulateSingleRate({
			...adaptation,
			perturbations: outcomes.map(() => 2)
		});
		outcomes.forEach(({ error }, i) => expect(error).toBeCloseTo(errors[i] ?? NaN, 6));
	});

	it('spreads along and across the solutions as its traits say', () => {
		const adaptation = { kind: 'single-rate' as const, retention: 1, rate: 0 };
		const { outcomes } = run(
			{ motorAlong: 0.8, motorAcross: 0.3, exploration: 0, adaptation },
			4000
		);
		const along = outcomes.map(({ z: [a = 0, b = 0] }) => (a - b) / Math.SQRT2);
		const across = outcomes.map(({ z: [a = 0, b = 0] }) => (a + b) / Math.SQRT2);
		// 2 % is two standard errors of an SD from 4000 trials.
		expect(sdOf(along)).toBeCloseTo(0.8, 1);
		expect(Math.abs(sdOf(along) / 0.8 - 1)).toBeLessThan(0.03);
		expect(Math.abs(sdOf(across) / 0.3 - 1)).toBeLessThan(0.03);
	});

	it('scatters less the longer it has practised', () => {
		const traits = { motorAlong: 0.5, motorAcross: 0.5, noviceFactor: 3, learningTrials: 40 };
		const { outcomes } = run(traits, 400);
		const errors = outcomes.map(({ error }) => Math.abs(error));
		const mean = (part: number[]) => part.reduce((sum, value) => sum + value, 0) / part.length;
		expect(mean(errors.slice(0, 30))).toBeGreaterThan(1.6 * mean(errors.slice(-200)));
	});

	it.each(['keep', 'gradient'] as const)(
		'leaves a penalized place by reward alone (%s)',
		(rule) => {
			const inside: TrialConditions = {
				...PLAIN,
				isPenalized: ([a = 0, b = 0]) => Math.hypot(a, b) < 1.2
			};
			const traits = { motorAlong: 0.6, motorAcross: 0.3, exploration: 0.8, rewardRule: rule };
			const { outcomes } = run({ ...traits, rewardRate: 0.6 }, 600, { conditions: inside });
			const free = outcomes.slice(-100).filter(({ hit, penalized }) => hit && !penalized).length;
			const still = run({ ...traits, exploration: 0 }, 600, { conditions: inside });
			const stuck = still.outcomes.slice(-100).filter(({ hit, penalized }) => hit && !penalized);
			expect(free).toBeGreaterThan(stuck.length + 20);
		}
	);

	it('learns nothing where nothing is shown, and goes on drifting back in a clamp', () => {
		const conditions = { ...PLAIN, shift: 2, feedback: 'hidden' as const };
		expect(run(QUIET, 30, { conditions }).state.adaptation.slow).toEqual([0]);
		const adaptation = { kind: 'single-rate' as const, retention: 0.9, rate: 0.2 };
		const traits = redundantTraitsSchema.parse({ ...QUIET, adaptation });
		const learned = run({ ...QUIET, adaptation }, 60, { conditions: { ...PLAIN, shift: 2 } });
		const before = learned.state.adaptation.slow[0] ?? 0;
		const clamped = runRedundantTrial({
			...{ task: forces, traits, state: learned.state, stream: createSeededStream(1) },
			conditions: { ...PLAIN, feedback: 0 }
		});
		expect(clamped.state.adaptation.slow[0]).toBeCloseTo(0.9 * before, 12);
	});

	it('forgets over hours', () => {
		const { state, traits } = run(QUIET, 80, { conditions: { ...PLAIN, shift: 1 } });
		const rested = restRedundantPerson(traits, state, 24);
		const kept = (rested.adaptation.slow[0] ?? 0) / (state.adaptation.slow[0] ?? 1);
		expect(kept).toBeCloseTo(0.2 + 0.8 * Math.exp(-24 / 120), 12);
	});

	it('takes back both results of a task with two', () => {
		const traits = { motorAlong: 0.5, motorAcross: 0.2, exploration: 0.2 };
		const { outcomes } = run(traits, 200, { task: arm });
		expect(outcomes.every(({ error }) => Number.isFinite(error))).toBe(true);
		const hits = outcomes.slice(-100).filter(({ hit }) => hit).length;
		expect(hits).toBeGreaterThan(50);
	});
});

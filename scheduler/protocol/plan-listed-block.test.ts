import { describe, expect, test } from 'vitest';
import { createTask } from '../tasks/create-task.ts';
import { createScaledTask } from '../tasks/scaled-task.ts';
import { taskRecordSchema } from '../tasks/task-record.ts';
import { planListedBlock } from './plan-listed-block.ts';

const variable = (name: string, scale: number) => ({
	...{ name, unit: 'N', min: -50, max: 50 },
	...{ origin: 10, scale, resolution: 0 }
});
const task = createScaledTask(
	createTask(
		taskRecordSchema.parse({
			...{ type: 'linear', coef: [1, 1], target: 20, tolerance: 1 },
			variables: [variable('left', 2), variable('right', 4)]
		})
	)
);
const cloud = {
	mean: [0, 0],
	cov: [
		[1, 0],
		[0, 1]
	]
};

describe('a listed block', () => {
	test('of adaptive time is plain practice', () => {
		const plan = { number: 1, purpose: 'adaptive', trials: 60 } as const;
		expect(planListedBlock(plan, { task, cloud: null })).toEqual({
			kind: 'practice',
			parameters: { trials: 60 }
		});
	});

	test('with a region knows how much of the own cloud it catches', () => {
		// Two standard deviations around the mean of a round cloud: 1 − exp(−2) = .8647 (chi-square, 2 df).
		const plan = { number: 1, purpose: 'region', trials: 60 } as const;
		const region = { center: [10, 10], halfWidth: [4, 8] };
		const placed = planListedBlock({ ...plan, region }, { task, cloud });
		expect(placed.parameters.region).toMatchObject({ center: [0, 0], centerInUnits: [10, 10] });
		expect(placed.parameters.region?.shape).toEqual([
			[4, 0],
			[0, 4]
		]);
		expect(placed.parameters.region?.share).toBeCloseTo(1 - Math.exp(-2), 6);
		expect(placed.parameters.region?.stay).toBeCloseTo(Math.exp(-2), 6);
	});

	test('with a shift moves the target in even steps, or at once', () => {
		const plan = { number: 1, purpose: 'shift', trials: 5 } as const;
		const levels = (shift: { from: number; to: number }) =>
			planListedBlock({ ...plan, shift }, { task, cloud: null }).parameters.levels;
		expect(levels({ from: 0, to: 2 })).toEqual([0, 0.5, 1, 1.5, 2]);
		expect(levels({ from: 2, to: 2 })).toEqual([2, 2, 2, 2, 2]);
	});

	test('of rest is none', () => {
		const plan = { number: 1, purpose: 'rest', trials: 0 } as const;
		expect(() => planListedBlock(plan, { task, cloud: null })).toThrow(RangeError);
	});
});

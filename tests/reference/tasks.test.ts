import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { createTask } from '../../scheduler/tasks/create-task.ts';
import { computeSteadyBounce } from '../../scheduler/tasks/models/paddle-stability.ts';
import { computeTetherAlignment } from '../../scheduler/tasks/models/tether/tether-facts.ts';
import { tetheredBallRecordSchema } from '../../scheduler/tasks/models/tether/tether-record.ts';
import { taskRecordSchema } from '../../scheduler/tasks/task-record.ts';
import { findCase, numbers } from './reference-values.ts';
import { expectNumbers } from './expect-numbers.ts';

const variable = (name: string, origin: number, [min, max]: [number, number] = [-100, 100]) => ({
	...{ name, unit: '', min, max, origin, scale: 1 }
});

describe('task models', () => {
	it('puts the throws of the closed form on the solution manifold', () => {
		const { inputs, expected, tolerance } = findCase('projectile-manifold');
		const { h, D, H, g } = inputs;
		const task = createTask(
			taskRecordSchema.parse({
				...{ type: 'projectile', h, D, H, g, tolerance: 0.25 },
				variables: [variable('v', 7), variable('theta_deg', 35)]
			})
		);
		const speeds = numbers.parse(expected['v']);
		const angles = numbers.parse(inputs['theta_deg']);
		const results = speeds.map((v, i) => task.evaluate([v, angles[i] ?? 0]));
		expectNumbers(
			results,
			results.map(() => 0),
			tolerance
		);
	});

	it('has no slope by the angle at the least speed', () => {
		const { inputs, expected } = findCase('projectile-manifold');
		const { h, D, H, g } = inputs;
		const task = createTask(
			taskRecordSchema.parse({
				...{ type: 'projectile', h, D, H, g, tolerance: 0.25 },
				variables: [variable('v', 7), variable('theta_deg', 35)]
			})
		);
		const at = [Number(expected['v_min']), Number(expected['theta_at_v_min_deg'])];
		expectNumbers([task.evaluate(at), task.gradient(at)[1]], [0, 0], { abs: 1e-8 });
	});

	it('has the alignment numbers of the sheet, section A1', () => {
		const published = { k: 1, m: 0.1, relaxationTime: 20, arm: 0.4, pivot: [0, -1.5] };
		const both = [{ ...published, target: [0.05, 1.055] }, {}].map((model) => {
			const record = tetheredBallRecordSchema.parse({ type: 'tethered-ball', ...model });
			return computeTetherAlignment(record);
		});
		expectNumbers(
			both.map(({ number }) => number),
			[0.3948, 0.428],
			{ abs: 5e-4 }
		);
		expect(both.map(({ freeAngleDeg }) => freeAngleDeg)).toEqual([null, null]);
	});

	it('finds the steady bounce to be the fixed point of one bounce', () => {
		const bouncing = { restitution: 0.5, g: 9.81 };
		const steady = computeSteadyBounce(bouncing, { apex: 0.6, impactHeight: 0.1 });
		if (!steady.ok) throw new RangeError(steady.reason);
		const record = taskRecordSchema.parse({
			...{ type: 'paddle-bounce', ...bouncing, targetHeight: 0.6, impactHeight: 0.1 }
		});
		const miss = createTask(record).evaluate([steady.ballSpeed, steady.paddleSpeed]);
		expectNumbers(miss, 0, { abs: 1e-12 });
		// Up and down at the speed of the apex: v² = 2·g·0.5.
		expectNumbers(steady.ballSpeed, -Math.sqrt(9.81), { abs: 1e-12 });
		expectNumbers(steady.period, 2 / Math.sqrt(9.81), { abs: 1e-12 });
	});

	it('gives a formula its value and exact gradient', () => {
		const { inputs, expected, tolerance } = findCase('generic-gradient');
		const { a, b, c } = z.record(z.string(), z.number()).parse(inputs['x']);
		const task = createTask(
			taskRecordSchema.parse({
				...{ type: 'formula', formula: inputs['formula'], tolerance: 1, resultUnit: '' },
				variables: [variable('a', 1), variable('b', 1), variable('c', 1)]
			})
		);
		const at = [a ?? 0, b ?? 0, c ?? 0];
		expectNumbers(task.evaluate(at), expected['value'], tolerance);
		expectNumbers(task.gradient(at), expected['gradient'], { rel: 1e-12 });
	});
});

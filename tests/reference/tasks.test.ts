import { describe, it } from 'vitest';
import { z } from 'zod';
import { createTask } from '../../scheduler/tasks/create-task.ts';
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

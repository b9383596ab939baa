import { describe, expect, it } from 'vitest';
import { checkSmoothness } from './check-smoothness.ts';
import { createTask } from './create-task.ts';
import { taskRecordSchema } from './task-record.ts';

const variables = ['a', 'b'].map((name) => ({
	...{ name, unit: '', min: -9, max: 9, origin: 0, scale: 1 }
}));

function isSmooth(formula: string, x: number[]): boolean | null {
	const record = { type: 'formula', formula, tolerance: 1, resultUnit: '', variables };
	return checkSmoothness(createTask(taskRecordSchema.parse(record)), x);
}

describe('checkSmoothness', () => {
	it.each([
		['a^2*sin(b) + exp(a)', [1.3, 0.7], true],
		['abs(a)', [1, 0], true],
		['abs(a)', [0, 0], false],
		['max(a, b)', [2, 1], true],
		['max(a, b)', [1, 1], false],
		['min(a^2, b)', [2, 4], false],
		['atan2(b, a)', [-1, 0], false],
		['atan2(b, a)', [1, 1], true],
		['a*1000000 + b', [3, 2], true],
		['abs(a - 1)^3', [1, 0], true],
		['log(a)', [-1, 0], null],
		['sqrt(a)', [0, 0], null]
	])('%s at %j: %j', (formula, x, smooth) => {
		expect(isSmooth(formula, x)).toBe(smooth);
	});

	it.each(['tethered-ball', 'arm-endpoint', 'cart-pendulum', 'throw-azimuth'])(
		'finds %s smooth at its origin',
		(type) => {
			const task = createTask(taskRecordSchema.parse({ type }));
			expect(
				checkSmoothness(
					task,
					task.variables.map(({ origin }) => origin)
				)
			).toBe(true);
		}
	);
});

import { describe, expect, it } from 'vitest';
import { norm, subtract } from '../linear-algebra/vector.ts';
import { createTask } from './create-task.ts';
import { createScaledTask } from './scaled-task.ts';
import { taskRecordSchema } from './task-record.ts';
import { computeShortestWays } from './shortest-ways.ts';
import { traceSurface } from './trace-surface.ts';

const axis = (name: string) => ({ name, unit: '', min: -20, max: 20, origin: 0, scale: 1 });
const variables = ['a', 'b', 'c'].map(axis);
const scaled = (record: object) =>
	createScaledTask(createTask(taskRecordSchema.parse({ tolerance: 0.1, variables, ...record })));

describe('traceSurface', () => {
	it('finds straight lengths on a plane', () => {
		const plane = scaled({ type: 'linear', coef: [1, 2, -1], target: 0 });
		const { points, isComplete } = traceSurface(plane, [0, 0, 0], { reach: 4, spacing: 0.25 });
		expect(isComplete).toBe(true);
		expect(points.length).toBeGreaterThan(500);
		points.forEach(({ s, z }) => {
			const straight = norm(z);
			expect(s).toBeGreaterThanOrEqual(straight - 1e-12);
			expect(s).toBeLessThanOrEqual(1.05 * straight + 1e-12);
			expect(Math.abs(plane.evaluate(z))).toBeLessThan(1e-12);
		});
	});

	it('finds great-circle lengths on a ball', () => {
		const ball = scaled({ type: 'formula', formula: 'a^2+b^2+c^2-9', resultUnit: '' });
		const { points } = traceSurface(ball, [3, 0, 0], { reach: 9.6, spacing: 0.3 });
		const far = points.map(({ z }) => 3 * Math.acos(Math.min(1, Math.max(-1, (z[0] ?? 0) / 3))));
		points.forEach(({ s }, i) => {
			expect(s).toBeLessThanOrEqual(1.05 * (far[i] ?? 0) + 1e-9);
			expect(s).toBeGreaterThanOrEqual(0.99 * (far[i] ?? 0) - 1e-9);
		});
		expect(Math.max(...far)).toBeGreaterThan(9);
	});

	it('keeps points apart and within their number', () => {
		const plane = scaled({ type: 'linear', coef: [1, 1, 1], target: 0 });
		const trace = traceSurface(plane, [0, 0, 0], { reach: 9, spacing: 0.2, countMax: 200 });
		expect(trace.isComplete).toBe(false);
		trace.points.forEach(({ z }, i) =>
			trace.points
				.slice(0, i)
				.forEach((other) => expect(norm(subtract(z, other.z))).toBeGreaterThan(0.139))
		);
	});

	it('refuses a task with one free direction', () => {
		const line = scaled({ type: 'two-finger', variables: variables.slice(0, 2) });
		expect(() => traceSurface(line, [0, 0], { reach: 1, spacing: 0.1 })).toThrow(RangeError);
	});
});

describe('computeShortestWays', () => {
	it('goes round where that is shorter, and says where there is no way', () => {
		const ways = computeShortestWays(
			[
				[
					{ to: 1, length: 1 },
					{ to: 2, length: 5 }
				],
				[{ to: 2, length: 1 }],
				[],
				[]
			],
			0
		);
		expect(ways).toEqual([0, 1, 2, Number.POSITIVE_INFINITY]);
	});
});

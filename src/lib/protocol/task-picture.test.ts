import { describe, expect, it } from 'vitest';
import { taskRecordSchema } from '$scheduler/tasks/task-record';
import { createPatternDraft } from './patterns';
import { readTask } from './read-task';
import { pictureTask } from './task-picture';

describe('the picture of a task', () => {
	it('draws the puck’s zero line where μ = .18, D = 2 m say it is', () => {
		const record = readTask(createPatternDraft('two-arms').task);
		const picture = record && pictureTask(record);
		const points = picture?.zeroSet.flat() ?? [];
		expect(points.length).toBeGreaterThan(50);
		for (const [speed, position] of points) {
			expect(position + speed ** 2 / (2 * 0.18 * 9.81)).toBeCloseTo(2, 6);
		}
	});

	it('holds the third variable of a formula at its origin', () => {
		const { task } = createPatternDraft('single-visit');
		const variable = {
			unit: '',
			min: -1,
			max: 1,
			origin: 0.5,
			scale: 0.1,
			resolution: 0,
			weight: null
		};
		const variables = ['a', 'b', 'c'].map((name) => ({ ...variable, name }));
		Object.assign(task, { formula: 'a + b - c', tolerance: 0.1, variables });
		const record = readTask(task);
		const points = (record && pictureTask(record)?.zeroSet.flat()) ?? [];
		expect(points.length).toBeGreaterThan(50);
		for (const [a, b] of points) expect(a + b).toBeCloseTo(0.5, 6);
	});

	it('is none for one variable', () => {
		const { task } = createPatternDraft('single-visit');
		const variable = {
			unit: '',
			min: -1,
			max: 1,
			origin: 0,
			scale: 0.1,
			resolution: 0,
			weight: null,
			name: 'a'
		};
		Object.assign(task, { formula: 'a', tolerance: 0.1, variables: [variable] });
		const record = readTask(task);
		expect(record && pictureTask(record)).toBeNull();
	});
});

describe('a task of two results', () => {
	it('is drawn as the distance from the target, without a line of perfect trials', () => {
		const arm = taskRecordSchema.parse({ type: 'arm-endpoint' });
		const picture = pictureTask(arm);
		expect(picture?.zeroSet).toEqual([]);
		expect(picture?.zeroLabel).toBe('');
		const values = picture?.grid?.values.flat().filter((value) => value !== null) ?? [];
		expect(values.length).toBeGreaterThan(0);
		expect(Math.min(...values)).toBeGreaterThanOrEqual(0);
	});
});

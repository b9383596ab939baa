import { describe, expect, it } from 'vitest';
import { taskRecordSchema } from '$scheduler/tasks/task-record';
import { exampleFormula, getDefaultTask } from './default-tasks';
import { listTaskDifferences } from './list-task-differences';
import { taskTypes } from './task-models';

describe('difference of two tasks', () => {
	it.each(taskTypes)('%s has none to itself', (type) => {
		const record = type === 'formula' ? exampleFormula : getDefaultTask(type);
		expect(listTaskDifferences(record, structuredClone(record))).toEqual([]);
	});

	it('names constants, choices and ranges with their units', () => {
		const before = getDefaultTask('tethered-ball');
		const after = taskRecordSchema.parse({
			...before,
			...{ target: [0.3, 1.15], relaxationTime: null, postHit: 'truncate', tolerance: 0.03 },
			variables: before.variables.map((one, i) => (i === 1 ? { ...one, min: 0.5 } : one))
		});
		expect(listTaskDifferences(before, after)).toEqual([
			{ what: 'Target, y', before: '1.1 m', after: '1.15 m' },
			{ what: 'Relaxation time', before: '18 s', after: 'the swing does not die down' },
			{
				what: 'A ball that meets the post',
				before: 'counts as a fixed miss',
				after: 'is judged by its way up to the post'
			},
			{ what: 'Tolerance', before: '0.05 m', after: '0.03 m' },
			{ what: 'v_m_s, lowest', before: '−7 m/s', after: '0.5 m/s' }
		]);
	});

	it('says that the model is another one and stops there', () => {
		expect(listTaskDifferences(getDefaultTask('puck'), getDefaultTask('puck-push'))).toEqual([
			{ what: 'Model', before: 'Sliding puck', after: 'Pushed puck' }
		]);
	});

	it('says that a variable was added, and which weight it has', () => {
		const before = getDefaultTask('linear');
		if (before.type !== 'linear') throw new Error('another model');
		const first = before.variables[0];
		const after = taskRecordSchema.parse({
			...before,
			coef: [1, 2, 1, 1],
			variables: [...before.variables, { ...first, name: 'F4_N' }]
		});
		expect(listTaskDifferences(before, after)).toEqual([
			{ what: 'F2_N, weight', before: '1', after: '2' },
			{ what: 'Variable 4', before: 'none', after: 'F4_N' }
		]);
	});
});

import { describe, expect, it } from 'vitest';
import { taskRecordSchema, type TaskRecordInput } from '$scheduler/tasks/task-record';
import { hasZeroInside } from './has-zero-inside';

function throwAt(side: number): TaskRecordInput {
	const angle = { unit: 'deg', origin: 40, scale: 2 };
	return {
		type: 'throw-azimuth',
		...{ h: 1.5, D: 3, H: 1.5, g: 9.81, side, tolerance: 0.05 },
		variables: [
			{ name: 'speed', unit: 'm/s', min: 3, max: 8, origin: 5.5, scale: 0.2 },
			{ ...angle, name: 'elevation', min: 20, max: 70 },
			{ ...angle, name: 'azimuth', min: -10, max: 10, origin: 0 }
		]
	};
}

describe('hasZeroInside', () => {
	it('finds a perfect throw where two results must be right at once', () => {
		expect(hasZeroInside(taskRecordSchema.parse(throwAt(0.1)))).toBe(true);
	});

	it('finds none to a side that the ranges do not reach', () => {
		// 3 m ahead, at most 10° to the side: 3 · tan 10° = 0.53 m.
		expect(hasZeroInside(taskRecordSchema.parse(throwAt(1)))).toBe(false);
	});
});

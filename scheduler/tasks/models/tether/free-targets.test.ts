import { describe, expect, it } from 'vitest';
import { createTask } from '../../create-task.ts';
import { taskRecordSchema } from '../../task-record.ts';
import { computeFreeTargets, computeTetherAlignment } from './tether-facts.ts';

function tether(change: object) {
	const record = taskRecordSchema.parse({ type: 'tethered-ball', ...change });
	if (record.type !== 'tethered-ball') throw new Error('another model');
	return record;
}

describe('targets with a velocity-free line', () => {
	it.each([
		{},
		{ relaxationTime: null },
		{ target: [-0.6, 0.2] },
		{ pivot: [0.3, -1.2], arm: 0.5 }
	])('the nearest one has such a line at the angle said: %j', (change) => {
		const record = tether(change);
		const { nearest, distance, freeAngleDeg } = computeFreeTargets(record);
		const moved = { ...record, target: [nearest[0], nearest[1]] as [number, number] };
		expect(computeTetherAlignment(moved).freeAngleDeg).toBeCloseTo(freeAngleDeg, 6);
		const [x, y] = record.target;
		expect(Math.hypot(nearest[0] - x, nearest[1] - y)).toBeCloseTo(distance, 12);
		for (const speed of [2, 3, 5])
			expect(createTask(moved).results([freeAngleDeg, speed])[0]).toBeCloseTo(0, 6);
	});

	it('lies 4.5 cm from the product’s own target, whose alignment number is 0.428 m', () => {
		const record = tether({});
		const { distance } = computeFreeTargets(record);
		const growth = Math.exp(Math.PI / 18 / Math.sqrt(10 - 1 / 18 ** 2));
		expect(distance).toBeCloseTo((computeTetherAlignment(record).number - 0.38) / growth, 9);
		expect(distance).toBeCloseTo(0.045, 3);
		expect(computeTetherAlignment(record).number).toBeCloseTo(0.428, 3);
	});
});

import { describe, expect, it } from 'vitest';
import { groupMarks } from './finding-marks';

describe('marks of findings on the ladder', () => {
	const notesAt = groupMarks([
		{ number: 1, place: { visit: 3, arm: 'fixed', block: 2 } },
		{ number: 2, place: { visit: 3 } },
		{ number: 3, place: { visit: 3, block: 2 } },
		{ number: 4, place: { arm: 'fixed' } }
	]);

	it('stand at their block, or at the cell', () => {
		expect([...notesAt(2, 'adaptive')]).toEqual([
			[-1, [2]],
			[1, [3]]
		]);
	});

	it('of every arm and of one arm stand together, in order', () => {
		expect(notesAt(2, 'fixed').get(1)).toEqual([1, 3]);
		expect(notesAt(2, 'fixed').get(-1)).toEqual([2]);
	});

	it('without a visit stand in no cell', () => {
		expect(notesAt(0, 'fixed').size).toBe(0);
	});
});

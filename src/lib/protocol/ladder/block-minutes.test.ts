import { describe, expect, it } from 'vitest';
import { plainBlock } from '../empty-parts';
import { blockMinutes, rigTime, totalMinutes } from './block-minutes';

describe('how long a block takes', () => {
	it('is its trials, and the rest between them', () => {
		expect(blockMinutes(plainBlock('practice', 60), 8)).toBe(8);
		const rested = { ...plainBlock('practice', 61), restBetweenTrialsSeconds: 2 };
		expect(blockMinutes(rested, 6)).toBeCloseTo((61 * 6 + 60 * 2) / 60, 10);
	});

	it('is its own length in a rest, and not known while a number is missing', () => {
		expect(blockMinutes({ ...plainBlock('rest', 0), restMinutes: 5 }, 8)).toBe(5);
		expect(blockMinutes(plainBlock('practice', null), 8)).toBeNull();
		expect(blockMinutes(plainBlock('practice', 60), null)).toBeNull();
	});
});

it('a visit takes its set-up, trials and the rests before the last block', () => {
	const block = { ...plainBlock('practice', 60), restAfterMinutes: 1 };
	const rest = { ...plainBlock('rest', 0), restMinutes: 5 };
	const time = rigTime(15, [block, rest, block], 8);
	expect(time).toEqual({ setupMinutes: 15, trialMinutes: 16, restMinutes: 6 });
	expect(totalMinutes(time)).toBe(37);
});

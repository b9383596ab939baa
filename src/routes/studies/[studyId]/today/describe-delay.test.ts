import { describe, expect, it } from 'vitest';
import { describeDelay } from './describe-delay';

describe('describeDelay', () => {
	it('says how long until then, or since', () => {
		const minute = 60_000;
		expect(describeDelay(25 * minute)).toBe('in 25 min');
		expect(describeDelay(160 * minute)).toBe('in 2 h 40 min');
		expect(describeDelay(27 * 60 * minute)).toBe('in 1 d 3 h');
		expect(describeDelay(-90 * minute)).toBe('1 h 30 min ago');
		expect(describeDelay(1)).toBe('now');
	});
});

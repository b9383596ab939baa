import { describe, expect, it } from 'vitest';
import { findSampleChain } from './sample-chain';

describe('the chain of the front page', () => {
	const chain = findSampleChain();

	it('has six practice days and a retention visit', () => {
		expect(chain.starts).toHaveLength(7);
	});

	it('keeps 20 to 28 hours between days but for one weekend', () => {
		const days = chain.gapHours.slice(0, 5);
		expect(days.filter((hours) => hours >= 20 && hours <= 28)).toHaveLength(4);
		expect(days.filter((hours) => hours >= 68 && hours <= 100)).toHaveLength(1);
	});

	it('crosses the change of clocks with an hour less', () => {
		// 28 March 2027, 01:00 UTC: Lisbon goes from UTC+0 to UTC+1.
		const change = Date.UTC(2027, 2, 28, 1);
		const [before = 0, after = 0] = chain.starts.slice(-2);
		expect(before).toBeLessThan(change);
		expect(after).toBeGreaterThan(change);
		expect(chain.gapHours.at(-1)).toBe(167);
	});
});

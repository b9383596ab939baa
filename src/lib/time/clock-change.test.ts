import { describe, expect, it } from 'vitest';
import { findClockChange } from './clock-change';

const at = (iso: string) => Date.parse(iso);

describe('change of clocks', () => {
	it('is found to the millisecond with its direction', () => {
		expect(
			findClockChange(at('2027-03-18T09:30Z'), at('2027-04-01T08:30Z'), 'Europe/Lisbon')
		).toEqual({ atMs: at('2027-03-28T01:00Z'), direction: 'forward' });
		expect(
			findClockChange(at('2027-10-20T00:00Z'), at('2027-11-20T00:00Z'), 'America/New_York')
		).toEqual({ atMs: at('2027-11-07T06:00Z'), direction: 'back' });
	});

	it('is the last one of several', () => {
		const change = findClockChange(
			at('2027-01-01T00:00Z'),
			at('2027-12-01T00:00Z'),
			'Europe/Berlin'
		);
		expect(change).toEqual({ atMs: at('2027-10-31T01:00Z'), direction: 'back' });
	});

	it('is none where clocks stay, and none before it happens', () => {
		expect(findClockChange(at('2027-01-01T00:00Z'), at('2027-12-01T00:00Z'), 'Asia/Tokyo')).toBe(
			undefined
		);
		expect(findClockChange(at('2027-03-01T00:00Z'), at('2027-03-28T00:59Z'), 'Europe/Lisbon')).toBe(
			undefined
		);
	});
});

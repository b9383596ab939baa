import { describe, expect, it } from 'vitest';
import { inSteps } from './load-counts';
import { findClockChange } from './load-outlook';

describe('findClockChange', () => {
	it('finds the next change of the lab’s clocks within thirty days', () => {
		expect(findClockChange('2027-03-11', 'Europe/Lisbon')).toEqual({
			date: '2027-03-28',
			days: 17,
			fromMinutes: 0,
			toMinutes: 60
		});
		expect(findClockChange('2027-05-01', 'Europe/Lisbon')).toBeNull();
		expect(findClockChange('2027-03-11', 'Asia/Kolkata')).toBeNull();
	});
});

describe('inSteps', () => {
	it('shows nothing below five and then only every fifth person', () => {
		expect([0, 4, 5, 9, 10, 23].map(inSteps)).toEqual([null, null, 5, 5, 10, 20]);
	});
});

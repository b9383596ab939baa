import { describe, expect, it } from 'vitest';
import { fromGridTime, toGridTime } from './grid-clock';

describe('the clock of the grid', () => {
	it('shows the lab’s wall clock and gives the same instant back', () => {
		const instantMs = Date.UTC(2027, 6, 1, 8, 15);
		expect(toGridTime(instantMs, 'Europe/Lisbon')).toBe('2027-07-01T09:15:00Z');
		expect(fromGridTime(new Date('2027-07-01T09:15:00Z'), 'Europe/Lisbon')).toBe(instantMs);
	});

	it('gives no instant for a time that the clocks jump over', () => {
		expect(fromGridTime(new Date('2027-03-28T01:30:00Z'), 'Europe/Lisbon')).toBeNull();
	});
});

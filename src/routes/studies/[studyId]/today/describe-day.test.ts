import { describe, expect, it } from 'vitest';
import { describeDay } from './describe-day';

const visit = (startMs: number, state: 'booked' | 'attended' | 'no-show') => ({
	bookingId: `${startMs}`,
	participantId: 'p',
	code: 'TW-001',
	label: 'Day 1',
	rigName: 'Gull',
	startMs,
	endMs: startMs + 10,
	occupiedFromMs: startMs,
	occupiedToMs: startMs + 10,
	state
});

describe('describeDay', () => {
	it('counts the visits of a day by where they stand now', () => {
		const visits = [
			visit(0, 'attended'),
			visit(10, 'no-show'),
			visit(10, 'booked'),
			visit(40, 'attended'),
			visit(60, 'booked')
		];
		expect(describeDay({ rigs: ['Gull'], visits }, 45)).toBe(
			'5 visits: 1 came, 1 is running, 1 did not come, 1 to be said, 1 still to come'
		);
		expect(describeDay({ rigs: [], visits: [] }, 0)).toBe('No visits today');
	});
});

import { describe, expect, it } from 'vitest';
import { clockText, describeVisit, findHours, type DayVisit } from './day-band';

const visit = (fromMinute: number, toMinute: number): DayVisit => ({
	key: String(fromMinute),
	row: 0,
	fromMinute,
	toMinute,
	occupiedFromMinute: fromMinute - 15,
	occupiedToMinute: toMinute + 15,
	label: 'TW-004',
	detail: 'came',
	tone: 'came'
});

describe('findHours', () => {
	it('holds the occupied time of every visit', () => {
		expect(findHours([visit(7 * 60, 8 * 60), visit(16 * 60, 17 * 60)], null)).toEqual({
			from: 6,
			to: 18
		});
	});

	it('shows a morning when nothing is booked', () => {
		expect(findHours([], 20 * 60)).toEqual({ from: 9, to: 12 });
	});

	it('holds now beside the visits', () => {
		expect(findHours([visit(10 * 60, 11 * 60)], 18 * 60 + 5).to).toBe(19);
	});
});

describe('clockText', () => {
	it('goes on past midnight', () => {
		expect([clockText(570), clockText(1440), clockText(1500)]).toEqual(['09:30', '00:00', '01:00']);
	});
});

describe('describeVisit', () => {
	it('names person, state, rig and time', () => {
		expect(describeVisit(visit(570, 600), ['Gull'])).toBe('TW-004 came, Gull, 09:30 to 10:00');
	});
});

import { describe, expect, it } from 'vitest';
import { describeChain, findLeastWidth, formatHours, placeStops } from './chain-band';

describe('placeStops', () => {
	it('runs from one end to the other, farther for longer gaps', () => {
		const [a, b, c] = placeStops(3, [{ hours: 24 }, { hours: 96 }]);
		expect([a, c]).toEqual([0, 1]);
		expect(b).toBeCloseTo(1 / 3, 12);
	});

	it('puts a single stop at the beginning', () => {
		expect(placeStops(1, [])).toEqual([0]);
		expect(placeStops(0, [])).toEqual([]);
	});

	it('refuses gaps that do not fit the stops', () => {
		expect(() => placeStops(3, [{ hours: 24 }])).toThrow(RangeError);
	});
});

describe('findLeastWidth', () => {
	it('keeps the nearest two stops apart', () => {
		expect(findLeastWidth(3, [{ hours: 24 }, { hours: 96 }], 90)).toBe(270);
		expect(findLeastWidth(1, [], 90)).toBe(0);
	});
});

describe('formatHours', () => {
	it('shows a digit only where the data carry it', () => {
		expect([formatHours(24), formatHours(22.5), formatHours(166.96)]).toEqual([
			'24 h',
			'22.5 h',
			'167 h'
		]);
	});
});

describe('describeChain', () => {
	it('reads as a sentence', () => {
		const stops = [
			{ label: 'day 1', detail: 'Thu 09:30', state: 'booked' },
			{ label: 'day 2', state: 'booked' }
		] as const;
		expect(describeChain(stops, [{ hours: 24 }])).toBe('day 1 Thu 09:30, 24 h later day 2');
	});
});

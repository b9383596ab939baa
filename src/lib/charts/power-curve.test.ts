import { describe, expect, it } from 'vitest';
import { powerAt, tabulatePower } from './power-curve';

const points = [
	{ n: 10, power: 0.4 },
	{ n: 20, power: 0.6 },
	{ n: 30, power: 0.7 }
];

describe('powerAt', () => {
	it('gives a point its own value and shares between two', () => {
		expect(powerAt(points, 20)).toBe(0.6);
		expect(powerAt(points, 25)).toBeCloseTo(0.65, 12);
	});

	it('says nothing outside the curve', () => {
		expect([powerAt(points, 9), powerAt(points, 31), powerAt([], 10)]).toEqual([null, null, null]);
	});
});

describe('tabulatePower', () => {
	it('has a dash where a line has no value', () => {
		const line = { key: 'a', name: 'planned', tone: 'ink', style: 'solid', points } as const;
		const table = tabulatePower({
			curves: [line],
			marker: null,
			wanted: 0.8,
			xLabel: 'people per arm',
			tableAt: [10, 40]
		});
		expect(table).toEqual({ columns: ['per arm', '10', '40'], rows: [['planned', '.40', '–']] });
	});
});

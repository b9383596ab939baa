import { expect, it } from 'vitest';
import { findTop, tabulateCurves, type IntervalCurvesData } from './interval-curves';

const data: IntervalCurvesData = {
	lines: [
		{
			...{ name: 'blocks', tone: 'iris' },
			points: [{ x: 0.9, y: 0.1, low: 0.05, high: 0.2, from: '10 of 100' }]
		}
	],
	...{ xLabel: 'quantile', yLabel: 'share', planned: null, spread: '95 % interval' },
	goal: { y: 0.05, label: 'goal' },
	write: (y) => y.toFixed(2)
};

it('writes every drawn number into the table', () => {
	expect(tabulateCurves(data)).toEqual({
		columns: ['quantile', 'of', 'share', '95 % interval', 'from'],
		rows: [['0.9', 'blocks', '0.10', '0.05 to 0.20', '10 of 100']]
	});
});

it('leaves air above the highest interval, and a scale where nothing is known', () => {
	expect(findTop(data)).toBeCloseTo(0.216, 9);
	expect(findTop({ ...data, lines: [], goal: null })).toBe(1);
});

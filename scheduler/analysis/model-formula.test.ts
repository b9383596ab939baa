import { describe, expect, it } from 'vitest';
import { buildModelFrame } from './model-formula.ts';

const data = {
	y: [1, 2, 3, 4],
	day: [0, 1, 0, 1],
	arm: ['b', 'a', 'c', 'b'],
	person: ['p', 'p', 'q', 'q']
};
const listNames = (formula: string) => buildModelFrame(formula, data).fixed.map(({ name }) => name);

describe('model formulas', () => {
	it('give named columns, main effects first', () => {
		expect(listNames('y ~ day')).toEqual(['intercept', 'day']);
		expect(listNames('y ~ 0 + day')).toEqual(['day']);
		expect(listNames('y ~ day * arm')).toEqual([
			...['intercept', 'day', 'arm=b', 'arm=c', 'day:arm=b', 'day:arm=c']
		]);
	});

	it('compute arithmetic and text', () => {
		const { fixed, outcome } = buildModelFrame('log(y) ~ (day - 0.5):I(day^2) + arm', data);
		expect(outcome[1]).toBeCloseTo(Math.log(2), 14);
		expect(fixed.map(({ values }) => values)).toEqual([
			...[
				[1, 1, 1, 1],
				[1, 0, 0, 1],
				[0, 0, 1, 0],
				[-0, 0.5, -0, 0.5]
			]
		]);
	});

	it('read one random term', () => {
		const { random } = buildModelFrame('y ~ day + (1 + day | person)', data);
		expect(random?.groups).toEqual(['p', 'p', 'q', 'q']);
		expect(random?.columns.map(({ name }) => name)).toEqual(['intercept', 'day']);
		expect(buildModelFrame('y ~ 1', data).random).toBeNull();
	});

	it.each([
		['day', /one ~/],
		['y ~ week', /week/],
		['y ~ day + (1 | person) + (1 | arm)', /one random term/],
		['y ~ day + (1 || person)', /written/],
		['y ~ (day', /brackets/],
		['y ~ day + ', /missing/],
		['arm ~ day', /no number in row 1/],
		['y ~ 1/day', /row 1/]
	])('“%s” is refused and says why', (formula, message) => {
		expect(() => buildModelFrame(formula, data)).toThrow(message);
	});
});

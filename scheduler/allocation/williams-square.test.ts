import { describe, expect, it } from 'vitest';
import { buildWilliamsSquare, countOrders } from './williams-square.ts';

describe('Williams squares', () => {
	it.each([2, 3, 4, 5, 6, 7, 8, 9, 12])('balance order and place for %d treatments', (t) => {
		const sequences = buildWilliamsSquare(t);
		const times = t % 2 === 0 ? 1 : 2;
		expect(sequences).toHaveLength(t * times);
		for (const order of sequences)
			expect(order.toSorted((a, b) => a - b)).toEqual([...order.keys()]);
		const { follows, places } = countOrders(sequences);
		follows.forEach((row, a) => {
			row.forEach((count, b) => expect(count).toBe(a === b ? 0 : times));
		});
		expect(places.flat().every((count) => count === times)).toBe(true);
	});

	it('of three treatments are the known ones', () => {
		expect(buildWilliamsSquare(3)).toEqual([
			...[
				[0, 1, 2],
				[1, 2, 0],
				[2, 0, 1]
			],
			...[
				[2, 1, 0],
				[0, 2, 1],
				[1, 0, 2]
			]
		]);
	});

	it.each([1, 2.5, NaN])('%d treatments are refused', (t) => {
		expect(() => buildWilliamsSquare(t)).toThrow(RangeError);
	});

	it('orders of other treatments are refused', () => {
		expect(() => countOrders([[0, 5]])).toThrow(RangeError);
	});
});

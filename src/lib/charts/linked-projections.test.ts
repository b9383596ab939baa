import { describe, expect, it } from 'vitest';
import { listPanels, tabulateEllipsoid, type Projections } from './linked-projections';

const axis = (label: string) => ({ label, unit: 'cm', domain: [0, 10] as const });
const data: Projections = {
	axes: [axis('a'), axis('b'), axis('c')],
	trials: [[1, 2, 3]],
	ellipsoids: [
		{
			kind: 'own',
			center: [4, 5, 6],
			shape: [
				[4, 1, 0],
				[1, 9, 2],
				[0, 2, 16]
			]
		}
	]
};

describe('listPanels', () => {
	it('shows every pair of variables once', () => {
		expect(listPanels(data).map(({ x, y }) => x.label + y.label)).toEqual(['ab', 'ac', 'bc']);
	});

	it('takes trials and ellipsoid of the pair', () => {
		const last = listPanels(data)[2];
		expect(last?.trials).toEqual([[2, 3]]);
		expect(last?.ellipses[0]).toEqual({
			kind: 'own',
			center: [5, 6],
			shape: [
				[9, 2],
				[2, 16]
			]
		});
	});

	it('has no panel for a single variable', () => {
		expect(listPanels({ ...data, axes: [axis('a')] })).toEqual([]);
	});
});

describe('tabulateEllipsoid', () => {
	it('says how far the ellipsoid reaches along each variable', () => {
		expect(tabulateEllipsoid(data).rows[1]).toEqual(['own, reach ±', 2, 3, 4]);
	});
});

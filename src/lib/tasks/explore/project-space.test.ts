import { describe, expect, it } from 'vitest';
import { listBoxEdges, projectPoint } from './project-space';

const variables = [
	{ min: 0, max: 2 },
	{ min: -1, max: 1 },
	{ min: 10, max: 20 }
];

describe('picture in space', () => {
	it('puts the middle of the ranges in the middle of the page', () => {
		const { x, y } = projectPoint([1, 0, 15], variables, { turnDeg: 30, tiltDeg: 20 });
		expect(Math.hypot(x, y)).toBeCloseTo(0, 12);
	});

	it('shows the first variable to the right and the third upright when looked at from the front', () => {
		const front = { turnDeg: 0, tiltDeg: 0 };
		expect(projectPoint([2, 0, 15], variables, front).x).toBeCloseTo(1, 12);
		expect(projectPoint([1, 0, 20], variables, front).y).toBeCloseTo(-1, 12);
		expect(projectPoint([1, -1, 15], variables, front).depth).toBeGreaterThan(
			projectPoint([1, 1, 15], variables, front).depth
		);
	});

	it('keeps lengths when it is turned', () => {
		for (const turnDeg of [0, 37, 200]) {
			const { x, y, depth } = projectPoint([2, 1, 20], variables, { turnDeg, tiltDeg: 25 });
			expect(Math.hypot(x, y, depth)).toBeCloseTo(Math.sqrt(3), 12);
		}
	});

	it('has a box of twelve edges, each along one variable', () => {
		const edges = listBoxEdges(variables);
		expect(edges.length).toBe(12);
		edges.forEach(([a, b]) => expect(a.filter((value, i) => value !== b[i]).length).toBe(1));
	});
});

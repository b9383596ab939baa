import { describe, expect, it } from 'vitest';
import type { ErrorGrid } from './cloud-data';
import { bandCount, chooseBandStep, computeErrorBands, computeUndefinedRings } from './error-bands';

const steps = Array.from({ length: 21 }, (_, index) => index / 10 - 1);

/** The result is x + y over [−1, 1] × [−1, 1]. */
const plane: ErrorGrid = {
	x: steps,
	y: steps,
	values: steps.map((y) => steps.map((x) => x + y))
};

describe('computeErrorBands', () => {
	it('gives both sides of zero the same level at the same distance', () => {
		const bands = computeErrorBands(plane, 0.5);
		const level = (from: number) => bands.find((band) => Math.abs(band.from - from) < 1e-9)?.level;
		expect(level(0)).toBe(0);
		expect(level(-0.5)).toBe(0);
		expect(level(1)).toBe(2);
		expect(level(-1.5)).toBe(2);
		expect(bands).toHaveLength(2 * bandCount - 1);
	});

	it('puts every line inside the window where the result has its value', () => {
		for (const band of computeErrorBands(plane, 0.5)) {
			const inside = band.rings.flat().filter(([x, y]) => Math.abs(x) < 0.99 && Math.abs(y) < 0.99);
			for (const [x, y] of inside) expect(x + y).toBeCloseTo(band.from, 9);
		}
	});

	it('refuses a step of zero', () => {
		expect(() => computeErrorBands(plane, 0)).toThrow(RangeError);
	});
});

describe('computeUndefinedRings', () => {
	it('is empty when every place has a result', () => {
		expect(computeUndefinedRings(plane)).toEqual([]);
	});

	it('goes round the places without one', () => {
		const values = plane.values.map((row, j) => row.map((v, i) => (i < 4 && j < 4 ? null : v)));
		const rings = computeUndefinedRings({ ...plane, values });
		expect(rings).toHaveLength(1);
		expect(Math.max(...rings.flat().map(([x]) => x))).toBeCloseTo(-0.65, 6);
	});
});

describe('chooseBandStep', () => {
	it('is a round number and not below the tolerance', () => {
		expect(chooseBandStep(plane, 0.3)).toBeCloseTo(0.5, 12);
	});

	it('shows a quiet map without a tolerance in about ten bands', () => {
		expect(chooseBandStep(plane, null)).toBeCloseTo(0.2, 12);
	});
});

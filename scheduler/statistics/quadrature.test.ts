import { describe, expect, it } from 'vitest';
import { integrate, integrateReals, spreadPoints } from './quadrature.ts';

describe('quadrature', () => {
	it('is exact for polynomials up to degree 39', () => {
		expect(integrate((x) => x ** 38, { low: -1, high: 1 })).toBeCloseTo(2 / 39, 14);
		expect(integrate((x) => 3 * x * x, { low: 1, high: 4, panelCount: 3 })).toBeCloseTo(63, 12);
	});

	it('gives the area of the normal curve', () => {
		const curve = (x: number) => Math.exp((-x * x) / 2);
		const area = Math.sqrt(2 * Math.PI);
		expect(integrate(curve, { low: -12, high: 12, panelCount: 6 })).toBeCloseTo(area, 13);
		expect(integrateReals((x) => curve(x - 3), { centre: 2, step: 1 })).toBeCloseTo(area, 13);
	});

	it('gives the area of a skew curve: the gamma function of 1/2', () => {
		const skew = (y: number) => Math.exp(y / 2 - Math.exp(y));
		expect(integrateReals(skew, { centre: -1, step: 1 })).toBeCloseTo(Math.sqrt(Math.PI), 12);
	});

	it('refuses endless panels', () => {
		expect(() => spreadPoints(0, Infinity)).toThrow(RangeError);
	});
});

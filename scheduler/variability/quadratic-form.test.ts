import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { drawNormal } from '../random/random-stream.ts';
import { createSeededStream } from '../random/seeded-stream.ts';
import { diagonal } from '../linear-algebra/matrix.ts';
import { computeMassInside } from './mass-inside.ts';
import { computeQuadraticCdf } from './quadratic-form.ts';

const equalTerms = (count: number, mean: number) =>
	Array.from({ length: count }, () => ({ scale: 1, mean }));

describe('computeQuadraticCdf', () => {
	// scipy.stats.ncx2.cdf, SciPy 1.17.1: df, noncentrality, x.
	it.each([
		[5, 3, 6, 0.39287347108646237],
		[6, 20, 12, 0.04958230725906341],
		[8, 0.5, 3, 0.05484948053276209],
		[12, 100, 80, 0.05069576090764504]
	])('is noncentral chi-square: %d, %d at %d', (df, noncentrality, x, wanted) => {
		const squares = equalTerms(df, Math.sqrt(noncentrality / df));
		expect(computeQuadraticCdf(squares, x)).toBeCloseTo(wanted, 9);
	});

	// Scales 1, 1, 2, 2, 5, 5: a sum of exponential values, distribution in closed form.
	it.each([
		[3, 0.030668237197333137],
		[10, 0.3413466756415888],
		[40, 0.9619029517061987]
	])('is hypoexponential for scales in pairs, at %d', (x, wanted) => {
		const squares = [1, 1, 2, 2, 5, 5].map((scale) => ({ scale, mean: 0 }));
		expect(computeQuadraticCdf(squares, x)).toBeCloseTo(wanted, 9);
	});

	it('agrees with quadrature in two variables', () => {
		const scale = fc.double({ min: 0.05, max: 20, noNaN: true });
		const mean = fc.double({ min: -4, max: 4, noNaN: true });
		fc.assert(
			fc.property(scale, scale, mean, mean, (a, b, m, n) => {
				const mass = computeMassInside({
					mean: [m * Math.sqrt(a), n * Math.sqrt(b)],
					covariance: diagonal([a, b]),
					center: [0, 0],
					shape: diagonal([1, 1])
				});
				const inverted = computeQuadraticCdf(
					[
						{ scale: a, mean: m },
						{ scale: b, mean: n }
					],
					1
				);
				expect(Math.abs(inverted - (mass.ok ? mass.probability : NaN))).toBeLessThan(1e-8);
			})
		);
	});

	it('agrees with Monte Carlo in six variables within four standard errors', () => {
		const squares = [0.05, 0.2, 0.4, 0.1, 0.3, 0.02].map((scale, i) => ({ scale, mean: i / 5 }));
		const stream = createSeededStream(11);
		const draws = 40_000;
		let inside = 0;
		for (let k = 0; k < draws; k++)
			if (
				squares.reduce(
					(sum, { scale, mean }) => sum + scale * (mean + drawNormal(stream)) ** 2,
					0
				) <= 1
			)
				inside++;
		const probability = computeQuadraticCdf(squares, 1);
		const standardError = Math.sqrt((probability * (1 - probability)) / draws);
		expect(Math.abs(inside / draws - probability)).toBeLessThan(4 * standardError);
		expect(probability).toBeGreaterThan(0.1);
	});

	it('rises from 0 to 1 for far and near clouds alike, and is never anything else', () => {
		const scales = fc.array(fc.double({ min: 1e-6, max: 1e4, noNaN: true }), {
			minLength: 5,
			maxLength: 7
		});
		fc.assert(
			fc.property(scales, fc.double({ min: -30, max: 30, noNaN: true }), (list, mean) => {
				const at = (x: number) =>
					computeQuadraticCdf(
						list.map((scale) => ({ scale, mean })),
						x
					);
				const [low, high] = [at(0.5), at(2)];
				expect(low >= 0 && high <= 1 && high >= low - 1e-8).toBe(true);
			}),
			{ numRuns: 40 }
		);
	});

	it('refuses a scale that is not positive; below 0 there is nothing', () => {
		expect(() => computeQuadraticCdf([{ scale: 0, mean: 0 }], 1)).toThrow(RangeError);
		expect(() => computeQuadraticCdf([], 1)).toThrow(RangeError);
		expect(computeQuadraticCdf(equalTerms(2, 1), 0)).toBe(0);
	});
});

describe('computeMassInside above four variables', () => {
	it('is chi-square for a region of the cloud’s own shape', () => {
		const covariance = diagonal([1, 2, 3, 4, 5]);
		const shape = covariance.map((values) => values.map((value) => value * 9.236356899781123));
		const center = [1, 1, 1, 1, 1];
		const mass = computeMassInside({ mean: center, covariance, center, shape });
		// 90 % point of chi-square with 5 degrees of freedom (R 4.2 qchisq).
		expect(mass.ok && mass.probability).toBeCloseTo(0.9, 9);
	});
});
